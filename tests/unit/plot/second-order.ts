/** Closed forms of a second-order low-pass, H = 1/(1 + 2ζ·s/ω0 + s²/ω0²): figures for the drawings under test. */
import type { ResponseFigures, Shown, StepFigures } from '../../../shared/engine/types'

const shown = (text: string, unit: string): Shown => ({ text, unit, latex: `${text}\\,\\mathrm{${unit}}` })

export function lowPass(zeta: number, corner: number, from: number, to: number, points = 300): ResponseFigures {
  const frequency = Array.from({ length: points }, (_, i) => from * (to / from) ** (i / (points - 1)))
  const gainAt = (f: number) => -10 * Math.log10((1 - (f / corner) ** 2) ** 2 + (2 * zeta * f / corner) ** 2)
  const phaseAt = (f: number) => -Math.atan2(2 * zeta * f / corner, 1 - (f / corner) ** 2) * 180 / Math.PI
  const marks: ResponseFigures['marks'] = [{ kind: 'corner', frequency: corner, gain: gainAt(corner), shown: shown((corner / 1e3).toPrecision(4), 'kHz'), shownGain: shown(gainAt(corner).toFixed(2), 'dB') }]
  if (zeta < Math.SQRT1_2) {
    const peak = corner * Math.sqrt(1 - 2 * zeta ** 2)
    marks.push({ kind: 'peak', frequency: peak, gain: gainAt(peak), shown: shown((peak / 1e3).toPrecision(4), 'kHz'), shownGain: shown(gainAt(peak).toFixed(2), 'dB') })
  }
  const half = corner * Math.sqrt(1 - 2 * zeta ** 2 + Math.sqrt((1 - 2 * zeta ** 2) ** 2 + 1))
  marks.push({ kind: 'cut-off', frequency: half, gain: -10 * Math.log10(2), shown: shown((half / 1e3).toPrecision(4), 'kHz'), shownGain: shown('-3.01', 'dB') })
  return {
    curve: { frequency, gain: frequency.map(gainAt), phase: frequency.map(phaseAt) },
    marks,
    asymptotes: [
      { side: 'low', slope: 0, gainAtOneHertz: 0 },
      { side: 'high', slope: -40, gainAtOneHertz: 40 * Math.log10(corner) },
    ],
    problems: [],
    summary: [{ label: 'corner', shown: shown((corner / 1e3).toPrecision(4), 'kHz') }],
  }
}

/** Unit step of the same section, underdamped. */
export function lowPassStep(zeta: number, corner: number, points = 300): StepFigures {
  const w0 = 2 * Math.PI * corner
  const wd = w0 * Math.sqrt(1 - zeta ** 2)
  const end = 6 / (zeta * w0)
  const time = Array.from({ length: points }, (_, i) => end * i / (points - 1))
  const at = (t: number) => 1 - Math.exp(-zeta * w0 * t) * (Math.cos(wd * t) + zeta * w0 / wd * Math.sin(wd * t))
  const peakTime = Math.PI / wd
  const overshoot = Math.exp(-zeta * Math.PI / Math.sqrt(1 - zeta ** 2))
  const settled = 4 / (zeta * w0)
  return {
    time,
    value: time.map(at),
    finalValue: 1,
    peak: { time: peakTime, value: 1 + overshoot, overshoot, shown: shown((overshoot * 100).toFixed(1), '%'), shownTime: shown((peakTime * 1e6).toPrecision(4), 'µs') },
    settling: { time: settled, band: 0.02, shown: shown((settled * 1e6).toPrecision(4), 'µs') },
    problems: [],
  }
}
