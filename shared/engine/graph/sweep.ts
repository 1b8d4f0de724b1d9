/** Curves and figures for the response block. */
import { frequencyFunction } from '../functions/responseOf'
import type { Term } from '../check/term'
import { Fault, fault } from '../fault'
import { LN10, TWO_PI, powerOfTwo } from '../numeric/math'
import * as D from '../quantity/dimension'
import { COUNT, LEVEL, number } from '../quantity/kind'
import { showLevel, showNumber } from '../quantity/show'
import * as T from '../transfer'
import type { FrequencyCurve, Outcome, Rational } from '../transfer'
import type { Asymptote, Problem, ResponseFigures, ResponseMark, ResponseRequest, Shown, StepFigures, StepRequest } from '../types'
import type { Evaluation, Variable } from './evaluation'
import type { Sheet } from './sheet'

/** Points of a plot: fewer cannot show a resonance, more cannot be seen. */
const FEWEST = 16
const MOST = 4000
/** Corners of the tolerances drawn for the band at most. */
const CORNERS = 64

const HERTZ = number(D.FREQUENCY, { mark: 'Hz' })
const SECONDS = number(D.TIME)

export function responseFigures(sheet: Sheet, request: ResponseRequest, digits: number): ResponseFigures {
  try {
    return computeResponse(sheet, request, digits)
  }
  catch (error) {
    return { curve: { frequency: [], gain: [], phase: [] }, marks: [], asymptotes: [], problems: [problemOf(error)], summary: [] }
  }
}

export function stepFigures(sheet: Sheet, request: StepRequest, digits: number): StepFigures {
  try {
    return computeStep(sheet, request, digits)
  }
  catch (error) {
    return { time: [], value: [], problems: [problemOf(error)] }
  }
}

function problemOf(error: unknown): Problem {
  if (error instanceof Fault) return error.problem
  throw error
}

function settled<T>(outcome: Outcome<T>): T {
  if (outcome.ok) return outcome.value
  throw fault(outcome.code, outcome.message, outcome.hint)
}

function transferTerm(sheet: Sheet, name: string): Term {
  const entity = sheet.lookup(name)
  if (entity?.type === 'transfer') return entity.term
  if (entity?.type === 'failed') throw fault('depends-on-error', `\`${name}\` has no value: there is an error in line ${entity.line}.`, `Mend line ${entity.line} first.`)
  if (entity) throw fault('argument-kind', `\`${name}\` is not a transfer function.`, `Define one with \`${name}(s) = …\`, or choose another.`)
  throw fault('unknown-name', name === '' ? 'No transfer function is chosen.' : `\`${name}\` is not defined.`, 'Define `H(s) = …` above and choose it.')
}

/** A value typed in a field, in SI units. Frequencies in rad/s are taken to hertz. */
function typedValue(sheet: Sheet, source: string, dimension: typeof D.TIME, what: string, example: string): number | undefined {
  if (source.trim() === '') return undefined
  const { result } = sheet.expression(source)
  const [problem] = result.problems
  if (result.status === 'error' && problem) throw new Fault({ ...problem, message: `${what}: ${problem.message}` })
  const { value } = result
  if (value?.type !== 'number' || !D.sameDimension(value.dimension, dimension)) throw fault('field-dimension', `${what} is ${example.startsWith('1 k') ? 'a frequency' : 'a time'} with its unit.`, `Write \`${example}\`.`)
  return value.mark === 'rad/s' ? value.si / TWO_PI : value.si
}

function computeResponse(sheet: Sheet, request: ResponseRequest, digits: number): ResponseFigures {
  const term = transferTerm(sheet, request.transfer)
  const from = typedValue(sheet, request.from, D.FREQUENCY, 'From', '1 kHz')
  const to = typedValue(sheet, request.to, D.FREQUENCY, 'To', '1 kHz')
  const points = Math.min(MOST, Math.max(FEWEST, Math.round(Number.isFinite(request.points) ? request.points : 400)))
  const { rational } = term
  if (!rational) return generalResponse(term, from ?? 1, to ?? 1e6, points)
  const r = rational()
  const range = from === undefined || to === undefined ? settled(T.automaticRange(r)) : { from, to }
  const curve = settled(T.frequencyCurve(r, from ?? range.from, to ?? range.to, points))
  const envelope = envelopeOf(term, rational, curve, sheet.evaluation)
  return {
    curve: { frequency: [...curve.frequency], gain: finiteAll(curve.gain), phase: finiteAll(curve.phase), ...envelope },
    marks: T.curveMarks(r).map(mark => shownMark(mark, digits)),
    asymptotes: asymptotesOf(r),
    problems: [],
    summary: summaryOf(r, digits),
  }
}

function generalResponse(term: Term, from: number, to: number, points: number): ResponseFigures {
  const curve = settled(T.generalFrequencyCurve(frequencyFunction(term), from, to, points))
  return {
    curve: { frequency: [...curve.frequency], gain: finiteAll(curve.gain), phase: finiteAll(curve.phase) },
    marks: [], asymptotes: [], problems: [], summary: [],
  }
}

/** JSON has no infinity: a null is drawn at the bottom of any plot, a pole on the axis at its top. */
function finiteAll(values: Float64Array): number[] {
  return [...values].map(value => Number.isFinite(value) ? value : value > 0 ? 1e4 : -1e4)
}

function shownMark(mark: T.CurveMark, digits: number): ResponseMark {
  return { kind: mark.kind, frequency: mark.frequency, gain: mark.gain, shown: showNumber(mark.frequency, HERTZ, digits), shownGain: showLevel(mark.gain, LEVEL, digits) }
}

function asymptotesOf(r: Rational): Asymptote[] {
  const lines = T.asymptotes(r)
  return lines.ok ? lines.value.map(({ side, slope, gainAtOneHertz }) => ({ side, slope, gainAtOneHertz })) : []
}

/** Least and greatest gain over the corners of the tolerances and the nominal. */
function envelopeOf(term: Term, rational: () => Rational, curve: FrequencyCurve, evaluation: Evaluation): { gainLow: number[], gainHigh: number[] } | undefined {
  const { variables } = term
  if (variables.length === 0) return undefined
  const low = Float64Array.from(curve.gain)
  const high = Float64Array.from(curve.gain)
  for (const corner of cornersOf(variables)) {
    const r = evaluation.atPoint(variables, corner, rational)
    if (!r.refused) widen(r, curve.frequency, low, high)
  }
  return { gainLow: finiteAll(low), gainHigh: finiteAll(high) }
}

function widen(r: Rational, frequency: Float64Array, low: Float64Array, high: Float64Array): void {
  frequency.forEach((f, i) => {
    const level = T.logModulus(r, f * TWO_PI) * DB_PER_NEPER
    low[i] = Math.min(low[i] ?? level, level)
    high[i] = Math.max(high[i] ?? level, level)
  })
}

const DB_PER_NEPER = 20 / LN10

/** Every corner; for many variables each one turned alone, and all together. */
function cornersOf(variables: readonly Variable[]): number[][] {
  const n = variables.length
  const ends = (pick: (i: number) => boolean) => variables.map((variable, i) => pick(i) ? variable.high : variable.low)
  let count = 1
  for (let i = 0; i < n && count <= CORNERS; i += 1) count *= 2
  if (count <= CORNERS) return Array.from({ length: count }, (_, k) => ends(i => Math.floor(k / powerOfTwo(i)) % 2 === 1))
  const alone = (high: boolean) => variables.map((_, k) => variables.map((variable, i) => i === k ? (high ? variable.high : variable.low) : variable.nominal))
  return [ends(() => true), ends(() => false), ...alone(true), ...alone(false)]
}

interface Line { label: string, shown: Shown }

function summaryOf(r: Rational, digits: number): Line[] {
  const lines: Line[] = []
  const add = (label: string, outcome: Outcome<number>, show: (x: number) => Shown) => {
    if (outcome.ok) lines.push({ label, shown: show(outcome.value) })
  }
  const hertz = (x: number) => showNumber(x, HERTZ, digits)
  const level = (x: number) => showLevel(x, LEVEL, digits)
  add('peak', T.resonancePeak(r), level)
  add('at', T.resonanceFrequency(r), hertz)
  add('corner', T.cornerFrequency(r), hertz)
  add('cut-off', T.cutoffFrequency(r), hertz)
  add('damping ratio', T.dampingRatio(r), x => showNumber(x, COUNT, Math.min(3, digits)))
  add('high slope', T.highSlope(r), x => slopeShown(x))
  return lines
}

function slopeShown(x: number): Shown {
  return { text: String(x).replace('-', '−'), unit: 'dB/decade', latex: `${x}\\,\\mathrm{dB/decade}` }
}

function computeStep(sheet: Sheet, request: StepRequest, digits: number): StepFigures {
  const term = transferTerm(sheet, request.transfer)
  const { rational } = term
  if (!rational) throw fault('not-rational', 'The step response needs a ratio of polynomials in `s`.', 'This function can be swept over frequency only.')
  const r = rational()
  const duration = typedValue(sheet, request.duration, D.TIME, 'Duration', '100 us') ?? settled(T.automaticDuration(r))
  const points = Math.min(MOST, Math.max(FEWEST, Math.round(Number.isFinite(request.points) ? request.points : 400)))
  const curve = settled(T.stepCurve(r, duration, points))
  const dimension = term.kind.type === 'laplace' ? term.kind.dimension : D.NONE
  return {
    time: [...curve.time],
    value: [...curve.value],
    ...(curve.finalValue === undefined ? {} : { finalValue: curve.finalValue }),
    ...peakOf(r, dimension, digits),
    ...settlingOf(r, digits),
    problems: [],
  }
}

function peakOf(r: Rational, dimension: typeof D.NONE, digits: number): Pick<StepFigures, 'peak'> {
  const peak = T.stepPeak(r)
  if (!peak.ok || !peak.value) return {}
  const { time, value, overshoot } = peak.value
  return { peak: { time, value, overshoot, shown: showNumber(value, number(dimension), digits), shownTime: showNumber(time, SECONDS, digits) } }
}

const BAND = 0.02

function settlingOf(r: Rational, digits: number): Pick<StepFigures, 'settling'> {
  const settling = T.settlingTime(r, BAND)
  return settling.ok ? { settling: { time: settling.value, band: BAND, shown: showNumber(settling.value, SECONDS, digits) } } : {}
}
