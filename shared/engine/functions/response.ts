/** Figures of the frequency response. */
import type { Band, Term, Value } from '../check/term'
import { mergedVariables, summedEffort } from '../check/term'
import { fault } from '../fault'
import { PI, pow } from '../numeric/math'
import { NONE, TIME } from '../quantity/dimension'
import { LEVEL, number } from '../quantity/kind'
import { findUnit } from '../quantity/unitTable'
import { unitProduct } from '../quantity/unitProduct'
import * as T from '../transfer'
import type { Attenuation, FrequencyFunction, Outcome, Rational } from '../transfer'
import type { Builtin, Call } from './call'
import { argument, mapValue, transferArgument } from './call'
import { atFrequency, figure, frequencyArgument, frequencyFunction, isBand, refuseDimension, valueOf } from './responseOf'

const DEGREES = number(NONE, { angle: 'deg' })
const HERTZ = number([0, 0, -1, 0, 0, 0, 0], { mark: 'Hz' })
const EFFORT = { point: 40, phase: 400, walk: 20_000, scan: 3000, roots: 2500 } as const

function slopeDisplay() {
  const [dB, decade] = [findUnit('dB'), findUnit('decade')]
  if (!dB || !decade) throw new Error('the table of units lacks dB or decade')
  return { unit: unitProduct([{ unit: dB, power: 1 }, { unit: decade, power: -1 }]), fixed: true }
}

function checkMagnitude(call: Call): Term {
  const transfer = transferArgument(call, 0)
  const kind = number(transfer.kind.dimension)
  if (isBand(call, 1)) return overBand(call, kind, db => pow(10, db / 20))
  return atFrequency(call, { kind, effort: EFFORT.point, rational: T.magnitude, general: T.generalMagnitude })
}

function checkGain(call: Call): Term {
  refuseDimension(call, transferArgument(call, 0))
  if (isBand(call, 1)) return overBand(call, LEVEL, db => db)
  return atFrequency(call, { kind: LEVEL, effort: EFFORT.point, rational: T.gain, general: T.generalGain })
}

type Extremes = Outcome<{ least: T.BandPoint, greatest: T.BandPoint }>

/** Least and greatest over a band, as a list of two: a requirement holds for both. */
function overBand(call: Call, kind: typeof LEVEL | typeof HERTZ, convert: (db: number) => number): Term {
  const transfer = transferArgument(call, 0)
  const band = argument(call, 1)
  const { rational } = transfer
  const f = frequencyFunction(transfer)
  return {
    kind: { type: 'list', of: kind }, at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + EFFORT.scan,
    run: () => {
      const { low, high } = band.run() as Band
      const extremes: Extremes = rational ? T.gainOverBand(rational(), low, high) : T.generalGainOverBand(f, low, high)
      const { least, greatest } = valueOf(extremes, call.at)
      if (least.gain === -Infinity) throw fault('no-level', 'The magnitude is zero within this band, so its least has no level.', 'State the limit from above only at single frequencies, or use `attenuation(H, band(f_1, f_2))`.', call.at)
      return [convert(least.gain), convert(greatest.gain)]
    },
    frequencies: () => band.run() as Band,
  }
}

/** The drop below the passband, or below the gain at a reference frequency; of a band the worst point. */
function checkAttenuation(call: Call): Term {
  const transfer = transferArgument(call, 0)
  const compute = attenuationOf(call, transfer)
  const frequency = argument(call, 1)
  if (isBand(call, 1)) {
    const range = () => frequency.run() as Band
    return { ...attenuationTerm(call, range, compute), worstAt: () => valueOf(compute(range()), call.at).omega }
  }
  const omega = frequencyArgument(call, 1)
  const single = (value: Value): Band => ({ low: omega(value), high: omega(value) })
  if (frequency.kind.type !== 'list') return attenuationTerm(call, () => single(frequency.run()), compute)
  const { variables, effort, at } = attenuationTerm(call, () => single(0), compute)
  return {
    kind: { type: 'list', of: DROP }, variables, effort, at,
    run: () => mapValue(frequency.run(), value => valueOf(compute(single(value)), call.at).attenuation),
  }
}

/** Infinite at a null of the response. */
const DROP = { type: 'level' as const, open: true as const }

function attenuationTerm(call: Call, range: () => Band, compute: (band: Band) => Outcome<Attenuation>): Term {
  const found = () => valueOf(compute(range()), call.at)
  return {
    kind: DROP, at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + EFFORT.scan,
    run: () => found().attenuation,
    reference: () => found().reference,
    frequencies: range,
  }
}

function attenuationOf(call: Call, transfer: Term): (band: Band) => Outcome<Attenuation> {
  const reference = call.args.length > 2 ? { omega: frequencyArgument(call, 2), run: argument(call, 2).run } : undefined
  const from = () => reference && reference.omega(reference.run())
  const { rational } = transfer
  if (rational) return ({ low, high }) => T.attenuationOverBand(rational(), low, high, from())
  const f = frequencyFunction(transfer)
  return ({ low, high }) => T.generalAttenuation(f, low, high, from())
}

function checkBand(call: Call): Term {
  const [low, high] = [frequencyArgument(call, 0), frequencyArgument(call, 1)]
  const [first, second] = [argument(call, 0).run, argument(call, 1).run]
  return {
    kind: { type: 'band' }, at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args),
    run: () => {
      const band = { low: low(first()), high: high(second()) }
      if (!(band.low <= band.high)) throw fault('band-range', 'A band runs from a lower to a higher frequency.', 'Exchange its two ends.', call.at)
      return band
    },
  }
}

/** A margin of a loop gain; without a crossing it is unbounded. */
function margin(kind: Term['kind'], rational: (r: Rational) => Outcome<T.Margin>, general: (f: FrequencyFunction) => Outcome<T.Margin>): (call: Call) => Term {
  return (call) => {
    const transfer = transferArgument(call, 0)
    refuseDimension(call, transfer)
    const f = frequencyFunction(transfer)
    const { rational: loop } = transfer
    return {
      kind, at: call.at, variables: mergedVariables(call.args), effort: summedEffort(call.args) + (loop ? EFFORT.scan : EFFORT.walk),
      run: () => valueOf(loop ? rational(loop()) : general(f), call.at).margin,
    }
  }
}

function checkCutoff(call: Call): Term {
  const transfer = transferArgument(call, 0)
  if (transfer.rational) return figure(call, HERTZ, EFFORT.roots, T.cutoffFrequency)
  const f = frequencyFunction(transfer)
  return { kind: HERTZ, at: call.at, variables: transfer.variables, effort: transfer.effort + EFFORT.walk, run: () => valueOf(T.generalCutoffFrequency(f), call.at) }
}

function checkInsertionLoss(call: Call): Term {
  throw fault('circuit-argument', '`insertionLoss` is taken of a circuit between its stated source and load.', 'For a transfer function use `attenuation(H, f)`.', argument(call, 0).at)
}

const COMPLEX_RATE = { type: 'list' as const, of: number([0, 0, -1, 0, 0, 0, 0], { mark: 'rad/s', complex: true }) }

function ofFunction(usage: string, check: (call: Call) => Term): Builtin {
  return { arity: [1, 1], usage, check }
}

function hertz(usage: string, compute: (r: Rational) => Outcome<number>): Builtin {
  return ofFunction(usage, call => figure(call, HERTZ, EFFORT.roots, compute))
}

/** Angles are plain numbers in radians (L10); the figures come in degrees. */
function inRadians(outcome: Outcome<number>): Outcome<number> {
  return outcome.ok ? { ...outcome, value: outcome.value / 180 * PI } : outcome
}

function marginInRadians(outcome: Outcome<T.Margin>): Outcome<T.Margin> {
  return outcome.ok ? { ...outcome, value: { ...outcome.value, margin: outcome.value.margin / 180 * PI } } : outcome
}

function checkPhase(call: Call): Term {
  return atFrequency(call, { kind: DEGREES, effort: EFFORT.phase, generalEffort: EFFORT.walk, rational: (r, w) => inRadians(T.phase(r, w)), general: (f, w) => inRadians(T.generalPhase(f, w)) })
}

function checkGroupDelay(call: Call): Term {
  return atFrequency(call, { kind: number(TIME), effort: EFFORT.phase, rational: T.groupDelay, general: T.generalGroupDelay })
}

function slope(usage: string, compute: (r: Rational) => Outcome<number>): Builtin {
  return ofFunction(usage, call => figure(call, { type: 'level', display: slopeDisplay() }, EFFORT.roots, compute))
}

export const RESPONSE: Record<string, Builtin> = {
  magnitude: { arity: [2, 2], usage: 'magnitude(H, f)', check: checkMagnitude },
  gain: { arity: [2, 2], usage: 'gain(H, f)', check: checkGain },
  phase: { arity: [2, 2], usage: 'phase(H, f)', check: checkPhase },
  groupDelay: { arity: [2, 2], usage: 'groupDelay(H, f)', check: checkGroupDelay },
  attenuation: { arity: [2, 3], usage: 'attenuation(H, f) or attenuation(H, f, f_ref)', check: checkAttenuation },
  band: { arity: [2, 2], usage: 'band(f_1, f_2)', check: checkBand },
  insertionLoss: { arity: [2, 2], usage: 'insertionLoss(X, f)', check: checkInsertionLoss },
  poles: ofFunction('poles(H)', call => figure(call, COMPLEX_RATE, EFFORT.roots, T.poles)),
  zeros: ofFunction('zeros(H)', call => figure(call, COMPLEX_RATE, EFFORT.roots, T.zeros)),
  cornerFrequency: hertz('cornerFrequency(H)', T.cornerFrequency),
  cutoffFrequency: ofFunction('cutoffFrequency(H)', checkCutoff),
  bandwidth: hertz('bandwidth(H)', T.bandwidth),
  resonanceFrequency: hertz('resonanceFrequency(H)', T.resonanceFrequency),
  resonancePeak: ofFunction('resonancePeak(H)', call => figure(call, LEVEL, EFFORT.roots, T.resonancePeak)),
  highSlope: slope('highSlope(H)', T.highSlope),
  lowSlope: slope('lowSlope(H)', T.lowSlope),
  gainMargin: ofFunction('gainMargin(L)', margin({ type: 'level', open: true }, T.gainMargin, T.generalGainMargin)),
  phaseMargin: ofFunction('phaseMargin(L)', margin(number(NONE, { angle: 'deg', open: true }), r => marginInRadians(T.phaseMargin(r)), f => marginInRadians(T.generalPhaseMargin(f)))),
}
