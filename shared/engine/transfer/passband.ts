/** What a response passes: its kind and reference, attenuation, cut-off, bandwidth, resonance. */
import { LN2, TWO_PI } from '../numeric/math'
import type { Analysis } from './analysis'
import type { Knot } from './extremes'
import { EQUAL, largest, levelCrossings, monotoneKnots } from './extremes'
import { DB_PER_NEPER, figureOf, refuseFrequency } from './figure'
import { gainOverBand, levelAt } from './gain'
import type { Outcome, Refusal } from './outcome'
import { found, refuse } from './outcome'
import type { Rational } from './rational'

/** ln √2: half power, which is 3.0103 dB and not 3 dB. */
const HALF_POWER = LN2 / 2

export type ResponseKind = 'low-pass' | 'high-pass' | 'band-pass' | 'other'

/** What attenuation is counted from. */
export interface Reference {
  /** `low`: f → 0, `high`: f → ∞, `peak`: the largest magnitude, `given`: a stated frequency. */
  readonly at: 'low' | 'high' | 'peak' | 'given'
  /** rad/s; 0 or Infinity for the limits. */
  readonly omega: number
  /** dB */
  readonly gain: number
}

export interface Attenuation {
  /** dB; Infinity at a null. */
  readonly attenuation: number
  /** Where it was taken, rad/s: over a band the worst point. */
  readonly omega: number
  readonly reference: Reference
}

export function kindOf(a: Analysis): ResponseKind {
  if (a.low.order === 0 && a.high.order < 0) return 'low-pass'
  if (a.low.order > 0 && a.high.order === 0) return 'high-pass'
  if (a.low.order > 0 && a.high.order < 0) return 'band-pass'
  return 'other'
}

/** Low-pass, high-pass, band-pass or other, by the limits of the magnitude. */
export function responseKind(r: Rational): Outcome<ResponseKind> {
  return figureOf(r, a => found(kindOf(a)))
}

/** The passband gain: of a low-pass at f → 0, of a high-pass at f → ∞, of a band-pass its peak, else at f → 0. */
export function passbandReference(r: Rational): Outcome<Reference> {
  return figureOf(r, (a) => {
    const kind = kindOf(a)
    if (kind === 'high-pass') return found({ at: 'high', omega: Infinity, gain: a.high.logSize * DB_PER_NEPER })
    if (kind === 'band-pass') return peakReference(r)
    if (a.low.order === 0) return found({ at: 'low', omega: 0, gain: a.low.logSize * DB_PER_NEPER })
    return refuse('no-passband', 'This function has no passband: its gain has no finite limit towards low frequency.',
      'State the frequency to count from: attenuation(H, f, f_ref).')
  })
}

function peakReference(r: Rational): Outcome<Reference> {
  const peak = largest(r)
  return peak.level === Infinity
    ? unboundedPeak()
    : found({ at: 'peak', omega: peak.omega, gain: peak.level * DB_PER_NEPER })
}

function unboundedPeak(): Refusal {
  return refuse('unbounded-peak', 'The magnitude is unbounded at resonance: a pair of poles lies on the axis.',
    'Put in the losses that limit it.')
}

function givenReference(r: Rational, omega: number): Outcome<Reference> {
  const refused = refuseFrequency(omega)
  if (refused) return refused
  const level = levelAt(r, omega)
  if (!Number.isFinite(level)) return refuse('no-reference', 'The gain at the reference frequency is not finite.')
  return found({ at: 'given', omega, gain: level * DB_PER_NEPER })
}

/**
 * Drop of the gain below its reference.
 * @param omega rad/s
 * @param reference rad/s; the passband if left out
 */
export function attenuation(r: Rational, omega: number, reference?: number): Outcome<Attenuation> {
  return attenuationOverBand(r, omega, omega, reference)
}

/** Least attenuation over a band, which is what a limit over the band is held against. Frequencies in rad/s. */
export function attenuationOverBand(r: Rational, from: number, to: number, reference?: number): Outcome<Attenuation> {
  if (r.refused) return r.refused
  const base = reference === undefined ? passbandReference(r) : givenReference(r, reference)
  if (!base.ok) return base
  const band = gainOverBand(r, from, to)
  if (!band.ok) return band
  const { omega, gain } = band.value.greatest
  return found({ attenuation: base.value.gain - gain, omega, reference: base.value }, band.warnings)
}

/** Half-power edges, Hz: of a low-pass its lowest, of a high-pass its highest, of a band-pass the two nearest its peak. */
export function halfPowerEdges(r: Rational): Outcome<number[]> {
  return figureOf(r, (a) => {
    const kind = kindOf(a)
    if (kind === 'low-pass') return edges([levelCrossings(r, a.low.logSize - HALF_POWER).at(0)])
    if (kind === 'high-pass') return edges([levelCrossings(r, a.high.logSize - HALF_POWER).at(-1)])
    if (kind === 'other') return refuse('no-passband', `This function is ${article(kind)}.`)
    const peak = largest(r)
    if (peak.level === Infinity) return unboundedPeak()
    const all = levelCrossings(r, peak.level - HALF_POWER)
    return edges([all.filter(w => w < peak.omega).at(-1), all.find(w => w > peak.omega)])
  })
}

function edges(omegas: readonly (number | undefined)[]): Outcome<number[]> {
  const result: number[] = []
  for (const omega of omegas) {
    if (omega === undefined) {
      return refuse('no-half-power', 'The magnitude does not pass half power within the range of numbers.')
    }
    result.push(omega / TWO_PI)
  }
  return found(result)
}

/** Half-power edge of a low-pass (its lowest) or high-pass (its highest), Hz. */
export function cutoffFrequency(r: Rational): Outcome<number> {
  return figureOf(r, (a) => {
    const kind = kindOf(a)
    if (kind === 'low-pass' || kind === 'high-pass') return first(halfPowerEdges(r))
    return refuse('no-cutoff', `This function is ${article(kind)}; a cut-off frequency belongs to a low-pass or high-pass.`,
      kind === 'band-pass' ? 'Use bandwidth(H) and resonanceFrequency(H).' : undefined)
  })
}

/** Half-power width: of a low-pass from 0 to its lowest edge, of a band-pass between the edges nearest its peak, Hz. */
export function bandwidth(r: Rational): Outcome<number> {
  return figureOf(r, (a) => {
    const kind = kindOf(a)
    if (kind === 'low-pass') return first(halfPowerEdges(r))
    if (kind !== 'band-pass') {
      return refuse('no-bandwidth', `This function is ${article(kind)}; a bandwidth belongs to a low-pass or band-pass.`,
        kind === 'high-pass' ? 'Use cutoffFrequency(H).' : undefined)
    }
    const both = halfPowerEdges(r)
    return both.ok ? found(both.value[1]! - both.value[0]!) : both
  })
}

/** Without the warnings, which the calling figure adds. */
function first(values: Outcome<number[]>): Outcome<number> {
  return values.ok ? found(values.value[0]!) : values
}

function article(kind: ResponseKind): string {
  return kind === 'other' ? 'neither a low-pass, a high-pass nor a band-pass' : `a ${kind}`
}

/** The resonance: the lowest of the largest magnitudes inside, if it exceeds both ends. */
export function resonance(r: Rational): Outcome<Knot> {
  return figureOf(r, () => {
    const knots = monotoneKnots(r)
    const ends = Math.max(knots[0]!.level, knots.at(-1)!.level)
    let top = -Infinity
    for (const k of knots.slice(1, -1)) top = Math.max(top, k.level)
    if (!(top > ends + EQUAL)) {
      return refuse('no-resonance', 'The magnitude has no peak between low and high frequency: there is no resonance.')
    }
    return found(knots.slice(1, -1).find(k => k.level >= top - EQUAL)!)
  })
}

/** Frequency of the largest magnitude inside, Hz. */
export function resonanceFrequency(r: Rational): Outcome<number> {
  const peak = resonance(r)
  return peak.ok ? found(peak.value.omega / TWO_PI, peak.warnings) : peak
}

/** How far the resonance lies above the gain at f → 0, dB. */
export function resonancePeak(r: Rational): Outcome<number> {
  const peak = resonance(r)
  if (!peak.ok) return peak
  return figureOf(r, (a) => {
    if (peak.value.level === Infinity) return unboundedPeak()
    if (a.low.order !== 0) {
      return refuse('no-low-gain', 'The gain at low frequency is not finite or zero, so the peak has nothing to be compared with.',
        'Use gain(H, resonanceFrequency(H)).')
    }
    return found((peak.value.level - a.low.logSize) * DB_PER_NEPER)
  })
}
