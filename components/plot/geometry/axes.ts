/** Rulings of semi-logarithmic paper and of the linear axes beside it. */
import { engineering, withMinus } from './numbers'

export interface Ruling { value: number, major: boolean, label: string | null }
export interface Range { from: number, to: number }

/** Decades ruled 1 to 9, from `from` to `to` (Hz), both positive. Powers of ten are major; narrow ranges also label 2 and 5. */
export function logRulings(from: number, to: number): Ruling[] {
  const decades = Math.log10(to / from)
  const alsoLabelled = decades < 1.2 ? [2, 5] : []
  const rulings: Ruling[] = []
  for (let exponent = Math.floor(Math.log10(from)); exponent <= Math.ceil(Math.log10(to)); exponent++) {
    for (let digit = 1; digit <= 9; digit++) {
      const value = digit * Number(`1e${exponent}`)
      if (value < from * (1 - 1e-9) || value > to * (1 + 1e-9)) continue
      const labelled = digit === 1 || alsoLabelled.includes(digit)
      rulings.push({ value, major: digit === 1, label: labelled ? engineering(value, 'Hz', 3) : null })
    }
  }
  return rulings
}

const inSteps = (range: Range, step: number, write: (value: number) => string): Ruling[] => {
  const count = Math.round((range.to - range.from) / step)
  return Array.from({ length: count + 1 }, (_, index) => {
    const value = range.from + index * step
    const clean = Math.abs(value) < step * 1e-9 ? 0 : value
    return { value: clean, major: clean === 0, label: write(clean) }
  })
}

/** The range that holds `low … high` in whole steps, and its rulings. */
function ruled(low: number, high: number, step: number, write: (value: number) => string) {
  const range = { from: Math.floor(low / step + 1e-9) * step, to: Math.ceil(high / step - 1e-9) * step }
  if (range.to <= range.from) range.to = range.from + step
  return { range, step, rulings: inSteps(range, step, write) }
}

/** How far below the highest value a gain axis reaches at most, dB: a notch must not flatten the rest. */
const DEEPEST_DB = 140
const MOST_LINES = 9

const signed = (value: number) => value > 0 ? `+${value}` : withMinus(String(value))

/** Gain axis in dB around `values`: steps of 1, 2, 5, 10, 20 or 40 dB, a little air above the highest. */
export function gainAxis(values: readonly number[]) {
  const finite = values.filter(Number.isFinite)
  const high = Math.max(...finite, -Infinity)
  const low = Math.min(...finite, Infinity)
  if (!Number.isFinite(high)) return ruled(-40, 10, 10, signed)
  const top = high + Math.max(2, (high - low) * 0.06)
  const bottom = Math.max(low, high - DEEPEST_DB)
  const step = [1, 2, 5, 10, 20, 40].find(one => (top - bottom) / one <= MOST_LINES) ?? 40
  return ruled(Math.min(bottom, top - 4 * step), top, step, value => signed(Math.round(value * 10) / 10))
}

/** Phase axis in degrees: steps that divide the circle. */
export function phaseAxis(values: readonly number[]) {
  const finite = values.filter(Number.isFinite)
  const high = finite.length > 0 ? Math.max(...finite) : 0
  const low = finite.length > 0 ? Math.min(...finite) : -90
  const middle = (high + low) / 2
  const reach = Math.max(high - low, 30)
  const step = [15, 45, 90, 180, 360, 720, 1800].find(one => reach / one <= 4.5) ?? 3600
  return ruled(Math.min(low, middle - step / 3), Math.max(high, middle + step / 3), step, value => `${withMinus(String(value))}°`)
}

/** Linear axis with steps of 1, 2 or 5 times a power of ten. */
export function linearAxis(low: number, high: number, lines: number, write: (value: number, step: number) => string) {
  const reach = high > low ? high - low : Math.abs(high) || 1
  const raw = reach / lines
  const power = 10 ** Math.floor(Math.log10(raw))
  const step = ([1, 2, 5, 10].find(one => one * power >= raw * (1 - 1e-9)) ?? 10) * power
  return ruled(low, high > low ? high : low + reach, step, value => write(value, step))
}
