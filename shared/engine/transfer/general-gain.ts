/** Attenuation, cut-off, phase margin and band limits of functions that are not rational, by scanning. */
import { rootBetween } from '../numeric/bracket'
import type { Complex } from '../numeric/complex'
import { argument, isFiniteComplex, modulus } from '../numeric/complex'
import { LN2, TWO_PI, degrees, ln, pow } from '../numeric/math'
import type { FrequencyFunction } from './general'
import { UNDEFINED_HERE } from './general'
import { DB_PER_NEPER, refuseBand } from './figure'
import type { BandPoint } from './gain'
import type { Margin } from './margins'
import { wrapped } from './margins'
import type { Outcome } from './outcome'
import { found, refuse } from './outcome'
import type { Attenuation, Reference } from './passband'

/** Points in a decade of a scan. */
const PER_DECADE = 400
/** A frequency that stands for f → 0, rad/s. */
const TOWARDS_ZERO = 1e-6
/** Where the edges of a passband are looked for, rad/s. */
const LOWEST = 1e-3
const HIGHEST = 1e13
/** Steps by which a maximum or minimum between three points is closed in. */
const CLOSING = 60
const GOLDEN = 0.3819660112501051

function levelOf(f: FrequencyFunction, omega: number): number {
  const value: Complex = f(0, omega)
  return isFiniteComplex(value) ? ln(modulus(value)) : NaN
}

function logSpaced(from: number, to: number): number[] {
  if (from === to) return [from]
  const start = from > 0 ? from : to * 1e-9
  const count = Math.max(2, Math.ceil(PER_DECADE * ln(to / start) / ln(10)))
  const points = Array.from({ length: count + 1 }, (_, k) => start * pow(to / start, k / count))
  points[0] = from
  points[count] = to
  return points
}

/** Least and greatest gain over a band, ends included; extremes between the points of the scan are closed in on. */
export function generalGainOverBand(f: FrequencyFunction, from: number, to: number): Outcome<{ least: BandPoint, greatest: BandPoint }> {
  const refused = refuseBand(from, to)
  if (refused) return refused
  const points = logSpaced(from, to)
  const levels = points.map(omega => levelOf(f, omega))
  if (levels.some(level => Number.isNaN(level))) return UNDEFINED_HERE
  return found({ least: extreme(f, points, levels, -1), greatest: extreme(f, points, levels, 1) })
}

function extreme(f: FrequencyFunction, points: readonly number[], levels: readonly number[], sign: 1 | -1): BandPoint {
  let best = 0
  for (let k = 1; k < levels.length; k++) if (sign * levels[k]! > sign * levels[best]!) best = k
  const inside = best > 0 && best < points.length - 1 && Number.isFinite(levels[best]!)
  const omega = inside ? closeIn(x => sign * levelOf(f, x), points[best - 1]!, points[best]!, points[best + 1]!) : points[best]!
  return { omega, gain: levelOf(f, omega) * DB_PER_NEPER }
}

/** Maximum between a and c, near b, by golden section (J. Kiefer, Proc. Amer. Math. Soc. 4 (1953)). */
function closeIn(g: (x: number) => number, a: number, b: number, c: number): number {
  let low = a
  let high = c
  let best = b
  let top = g(b)
  for (let k = 0; k < CLOSING; k++) {
    const x = high - best > best - low ? best + GOLDEN * (high - best) : best - GOLDEN * (best - low)
    const y = g(x)
    if (y > top) {
      if (x > best) low = best
      else high = best
      best = x
      top = y
    }
    else if (x > best) high = x
    else low = x
  }
  return best
}

/** Drop of the gain below that at f → 0, or at a stated frequency; over a band the least. Frequencies in rad/s. */
export function generalAttenuation(f: FrequencyFunction, from: number, to: number, reference?: number): Outcome<Attenuation> {
  const base = referenceOf(f, reference)
  if (!base.ok) return base
  const band = generalGainOverBand(f, from, to)
  if (!band.ok) return band
  const { omega, gain } = band.value.greatest
  return found({ attenuation: base.value.gain - gain, omega, reference: base.value })
}

function referenceOf(f: FrequencyFunction, reference: number | undefined): Outcome<Reference> {
  const omega = reference ?? lowFrequency(f)
  const level = levelOf(f, omega)
  if (!Number.isFinite(level) || (reference === undefined && !isFlat(f, omega))) {
    return refuse('no-passband', 'This function has no finite gain at the reference of its attenuation.',
      'State the frequency to count from: attenuation(H, f, f_ref).')
  }
  return found({ at: reference === undefined ? 'low' : 'given', omega: reference ?? 0, gain: level * DB_PER_NEPER })
}

function lowFrequency(f: FrequencyFunction): number {
  return Number.isFinite(levelOf(f, 0)) ? 0 : TOWARDS_ZERO
}

/** Whether the gain has a limit towards f → 0: a slope there means that it has none. */
function isFlat(f: FrequencyFunction, omega: number): boolean {
  return omega === 0 || Math.abs(levelOf(f, 8 * omega) - levelOf(f, omega)) < 0.1
}

/** Lowest half-power frequency below the gain at f → 0, Hz. */
export function generalCutoffFrequency(f: FrequencyFunction): Outcome<number> {
  const base = referenceOf(f, undefined)
  if (!base.ok) return base
  const level = base.value.gain / DB_PER_NEPER - LN2 / 2
  const points = logSpaced(LOWEST, HIGHEST)
  for (let k = 1; k < points.length; k++) {
    if (!(levelOf(f, points[k]!) < level)) continue
    const at = rootBetween(omega => levelOf(f, omega) - level, points[k - 1]!, points[k]!)
    if (at !== undefined) return found(at / TWO_PI)
  }
  return refuse('no-half-power', 'The magnitude does not fall to half power within the range that is scanned.')
}

/** Smallest 180° + phase, within (−180°, 180°], where |f| = 1; degrees; Infinity where the scan meets no such place. */
export function generalPhaseMargin(f: FrequencyFunction, from = LOWEST, to = HIGHEST): Outcome<Margin> {
  const level = (omega: number) => levelOf(f, omega)
  const points = logSpaced(from, to)
  let least: Margin = { margin: Infinity }
  let last = level(points[0]!)
  for (let k = 1; k < points.length; k++) {
    const here = level(points[k]!)
    const at = Math.sign(last) * Math.sign(here) < 0 ? rootBetween(level, points[k - 1]!, points[k]!) : undefined
    last = here
    if (at === undefined) continue
    const margin = wrapped(180 + degrees(argument(f(0, at)))) + 0
    if (margin < least.margin) least = { margin, omega: at }
  }
  return Number.isNaN(last) ? UNDEFINED_HERE : found(least)
}
