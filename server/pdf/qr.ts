import QRCode from 'qrcode'

export interface QrDrawing { size: number, path: string }

/** A QR code (ISO/IEC 18004, error correction M) as one SVG path in units of a module, with the quiet zone of four modules around it. */
export function qrDrawing(text: string): QrDrawing {
  const { modules } = QRCode.create(text, { errorCorrectionLevel: 'M' })
  const QUIET = 4
  let path = ''
  for (let y = 0; y < modules.size; y++) {
    for (let x = 0; x < modules.size; x++) {
      if (!modules.get(y, x)) continue
      let run = 1
      while (x + run < modules.size && modules.get(y, x + run)) run++
      path += `M${x + QUIET} ${y + QUIET}h${run}v1h-${run}z`
      x += run
    }
  }
  return { size: modules.size + 2 * QUIET, path }
}
