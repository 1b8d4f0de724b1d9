import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { PDFDocument } from 'pdf-lib'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { RESULTS_NAME, SOURCE_NAME, withContents } from '../../../server/pdf/attach'
import { qrDrawing } from '../../../server/pdf/qr'
import { sealed } from '../../../server/pdf/seal'
import { tokenDesk } from '../../../server/pdf/tokens'

describe('one-time tokens', () => {
  it('give their value once', () => {
    const desk = tokenDesk<string>()
    const token = desk.give('sheet')
    expect(desk.take(token)).toBe('sheet')
    expect(desk.take(token)).toBeNull()
    expect(desk.take('unknown')).toBeNull()
  })

  it('go stale after a minute', () => {
    let now = 0
    const desk = tokenDesk<string>(() => now)
    const [early, late] = [desk.give('a'), desk.give('b')]
    now = 59_999
    expect(desk.take(early)).toBe('a')
    now = 60_000
    expect(desk.take(late)).toBeNull()
  })
})

describe('the QR code', () => {
  it('is a path of whole modules with a quiet zone', () => {
    const { size, path } = qrDrawing('https://calc.example/verify/ABCDEFGHJKLMNPQRSTUV')
    expect(size).toBeGreaterThanOrEqual(21 + 8)
    expect(path).toMatch(/^(M\d+ \d+h\d+v1h-\d+z)+$/)
    // The finder pattern's upper edge is seven modules wide, after four of quiet zone (ISO/IEC 18004, 6.3.3).
    expect(path.startsWith('M4 4h7v1h-7z')).toBe(true)
  })
})

describe('the file of an issue', () => {
  let folder: string
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'seal-'))
    process.env.POLEWRIGHT_DATA_DIR = folder
  })
  afterAll(() => {
    delete process.env.POLEWRIGHT_DATA_DIR
    rmSync(folder, { recursive: true })
  })
  const contents = {
    title: 'C-014 revision B', author: 'Halden & Voss', subject: 'Auxiliary supply, input filter', keywords: ['CODE'],
    at: '2026-12-01T09:30:00.000Z', source: '{"µ":"±20 %"}', results: '{"lines":[]}',
  }
  const words = { firm: 'Halden & Voss Consulting Engineers', reason: 'Issued for construction', at: new Date(contents.at) }
  const pages = async () => {
    const document = await PDFDocument.create()
    document.addPage()
    return document.save()
  }
  const poppler = (tool: string, ...args: string[]) => execFileSync(tool, args, { cwd: folder, encoding: 'utf8' })

  it('carries source and results byte for byte', async () => {
    writeFileSync(join(folder, 'a.pdf'), await withContents(await pages(), contents))
    poppler('pdfdetach', '-saveall', 'a.pdf')
    expect(readFileSync(join(folder, SOURCE_NAME), 'utf8')).toBe(contents.source)
    expect(readFileSync(join(folder, RESULTS_NAME), 'utf8')).toBe(contents.results)
    expect(poppler('pdfinfo', 'a.pdf')).toMatch(/Title:\s+C-014 revision B/)
  })

  it('is sealed, and a changed byte breaks the seal', async () => {
    const file = await sealed(await withContents(await pages(), contents), words)
    writeFileSync(join(folder, 'b.pdf'), file)
    expect(poppler('pdfsig', 'b.pdf')).toMatch(/Total document signed\s+- Signature Validation: Signature is Valid/)
    file[file.indexOf('/Title') + 12]! ^= 1
    writeFileSync(join(folder, 'c.pdf'), file)
    expect(poppler('pdfsig', 'c.pdf')).not.toMatch(/Signature is Valid/)
  })
})
