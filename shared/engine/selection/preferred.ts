/** L14: the preferred value nearest by ratio, next above or next below. */
import type { Series } from './series'
import { SERIES } from './series'

/** Values within this ratio of a preferred one count as equal to it. */
const EQUAL = 1e-9

export type Choice = 'nearest' | 'above' | 'below'

/** @param x above zero, SI units; the decade is taken from it. */
export function preferredValue(x: number, series: Series, choice: Choice): number {
  const [below, above] = neighbours(x, series)
  if (choice === 'below') return within(above, x) ? above : below
  if (choice === 'above') return within(below, x) ? below : above
  // Nearest by ratio: x/below against above/x; a tie goes up.
  return x * x < below * above * (1 - EQUAL) ? below : above
}

function within(a: number, b: number): boolean {
  return Math.abs(a - b) <= EQUAL * Math.abs(b)
}

/** The preferred values around x: the largest ≤ x and the smallest above it. */
function neighbours(x: number, series: Series): [number, number] {
  const values = SERIES[series]
  const digits = (values[0] ?? 10) >= 100 ? 2 : 1
  const decade = Number(x.toExponential().split('e')[1]) - digits
  const candidates = [-1, 0, 1].flatMap(shift => values.map(value => Number(`${value}e${decade + shift}`)))
  let [below, above] = [candidates[0] ?? x, candidates.at(-1) ?? x]
  for (const candidate of candidates) {
    if (candidate <= x && candidate > below) below = candidate
    if (candidate > x && candidate < above) above = candidate
  }
  return [below, above]
}
