/** The tolerance analysis, as a generator that can be left between two slices of work. */
import { asNumber, mergedVariables } from '../check/term'
import { Fault, fault } from '../fault'
import type { Evaluation } from '../graph/evaluation'
import type { Sheet } from '../graph/sheet'
import { drawSample } from './draw'
import { extremesOf } from './extremes'
import { showOf } from './figures'
import type { Show } from './figures'
import { linearOf } from './linear'
import { modelOf } from './parts'
import type { Model } from './parts'
import type { Drawn, RootSumSquare, ToleranceOutput, ToleranceProgress, ToleranceRequest, ToleranceResult } from './request'
import { histogramOf, partInterval, quantile, summaryOf } from './statistics'
import { subjectOf, valueOrNothing } from './subject'
import type { Subject } from './subject'
import { requestProblems } from './validate'

/** Steps of work between two reports. */
const SLICE = 200_000
/** Steps that all samples may take together. */
const STEPS = 4_000_000_000
const BINS = 40
const PERCENTS = [0.135, 0.5, 2.5, 5, 50, 95, 97.5, 99.5, 99.865] as const

interface Analysed { output: ToleranceOutput, subject: Subject, show: Show, values: Float64Array, met: number }

/** Never throws for what a user wrote: that stands in `problems`, of the whole or of an output. */
export function* runTolerance(sheet: Sheet, request: ToleranceRequest, digits: number): Generator<ToleranceProgress, ToleranceResult> {
  const problems = requestProblems(sheet, request)
  if (problems.length > 0) return { problems, outputs: [] }
  const analysed: Analysed[] = []
  const outputs = request.outputs.map(({ id, source }): ToleranceOutput => ({ id, source, kind: 'error', problems: [] }))
  for (const output of outputs) {
    attempt(output, () => analysed.push(startOf(sheet, output, request, digits)))
  }
  const random = request.methods.includes('random')
  const of = outputs.length + (random ? request.samples : 0)
  for (const [i, one] of analysed.entries()) {
    attempt(one.output, () => exact(one, request))
    yield { done: i + 1, of }
  }
  if (random) yield* samples(sheet.evaluation, analysed.filter(one => one.output.problems.length === 0), request)
  return { problems: [], outputs }
}

function attempt(output: ToleranceOutput, run: () => void): void {
  try {
    run()
  }
  catch (error) {
    if (!(error instanceof Fault)) throw error
    output.problems.push(error.problem)
  }
}

function startOf(sheet: Sheet, output: ToleranceOutput, request: ToleranceRequest, digits: number): Analysed {
  const subject = subjectOf(sheet, output.source)
  const nominal = asNumber(subject.term.run())
  if (!Number.isFinite(nominal)) throw fault('tolerance-output', 'This has no finite value.', 'Choose another output.')
  const show = showOf(subject.term.kind, nominal, digits)
  output.kind = subject.met ? 'requirement' : 'value'
  output.nominal = show.value(nominal)
  if (subject.term.variables.length === 0) throw fault('tolerance-output', 'This depends on no value with a tolerance.', 'Give a part of it a tolerance, as in `R = 1 kohm ± 1 %`.')
  return { output, subject, show, values: new Float64Array(request.methods.includes('random') ? request.samples : 0), met: 0 }
}

/** Worst case and root-sum-square. */
function exact({ output, subject, show }: Analysed, request: ToleranceRequest): void {
  const model = modelOf(subject.term.variables, request)
  if (request.methods.includes('worst case')) {
    const { low, high, method } = extremesOf(subject, model)
    output.worst = { low: show.value(low), high: show.value(high), method }
  }
  if (request.methods.includes('root-sum-square')) output.rootSumSquare = linearFigures(subject, model, show)
}

function linearFigures(subject: Subject, model: Model, show: Show): RootSumSquare {
  const { low, high, standard, contributions } = linearOf(subject, model)
  return {
    low: show.value(low), high: show.value(high), standard: show.change(standard),
    contributions: contributions.map(row => ({ ...row, effect: show.change(row.effect) })),
  }
}

function* samples(evaluation: Evaluation, analysed: readonly Analysed[], request: ToleranceRequest): Generator<ToleranceProgress, void> {
  const effort = analysed.reduce((sum, one) => sum + one.subject.term.effort, 1)
  if (effort * request.samples > STEPS) {
    const problem = fault('too-much-work', 'So many samples of these outputs take too much work.', 'Draw fewer samples, or analyse fewer outputs.').problem
    analysed.forEach(({ output }) => output.problems.push(problem))
    return
  }
  const model = modelOf(mergedVariables(analysed.map(one => one.subject.term)), request)
  const before = request.outputs.length
  const slice = Math.max(1, Math.floor(SLICE / effort))
  const point = new Float64Array(model.variables.length)
  for (let sample = 0; sample < request.samples; sample += 1) {
    drawSample(model, request.seed, sample, point)
    evaluation.atPoint(model.variables, point, () => analysed.forEach(one => record(one, sample)))
    if ((sample + 1) % slice === 0) yield { done: before + sample + 1, of: before + request.samples }
  }
  for (const one of analysed) attempt(one.output, () => { one.output.random = drawnFigures(one) })
}

function record(one: Analysed, sample: number): void {
  one.subject.evaluation.startLine()
  const value = valueOrNothing(one.subject)
  one.values[sample] = value
  if (!Number.isNaN(value) && one.subject.met?.()) one.met += 1
}

function drawnFigures({ subject, show, values, met }: Analysed): Drawn {
  const finite = values.filter(value => Number.isFinite(value))
  if (finite.length === 0) throw fault('undefined-within-tolerance', 'This has no finite value at any sample.', 'Narrow the tolerances.')
  const { mean, deviation, sorted } = summaryOf(finite)
  const of = values.length
  return {
    mean: show.value(mean), deviation: show.change(deviation),
    percentiles: PERCENTS.map(percent => ({ percent, figure: show.value(quantile(sorted, percent / 100)) })),
    histogram: { low: show.value(sorted[0] ?? mean), high: show.value(sorted[sorted.length - 1] ?? mean), counts: histogramOf(sorted, BINS) },
    undefinedSamples: of - finite.length,
    ...(subject.met ? { yield: { met, samples: of, part: met / of, ...partInterval(met, of) } } : {}),
  }
}
