/** A hundred thousand samples of a circuit's tolerances with percentiles, against mathjs compiled on plain numbers. */
import { all, create } from 'mathjs'
import { createSheetEngine } from '../../shared/engine'
import type { ToleranceRequest } from '../../shared/engine'
import { compare } from './interleave'
import type { BenchRow, Side } from './interleave'
import { asInput, SETTINGS } from './sheets'

const math = create(all ?? {})
const SAMPLES = 100_000
const PERCENTS = [0.135, 2.5, 50, 97.5, 99.865]

const PARTS = { R: [10, 0.05], L: [10e-6, 0.1], C: [2.2e-6, 0.1] } as const
const LINES = ['R = 10 ohm ± 5 %', 'L = 10 uH ± 10 %', 'C = 2.2 uF ± 10 %', 'zeta = R/2*sqrt(C/L)']

const REQUEST: ToleranceRequest = {
  inputs: Object.keys(PARTS).map(name => ({ name, distribution: 'uniform' })),
  outputs: [{ id: 'zeta', source: 'zeta' }], methods: ['random'], seed: 1, samples: SAMPLES,
}

/** Median of the damping ratio as the engine's own tolerance analysis finds it. */
function ours(): { side: Side, median: () => number } {
  const engine = createSheetEngine(SETTINGS)
  engine.update(asInput(LINES))
  let median = NaN
  const analyse = () => {
    const steps = engine.tolerance(REQUEST)
    let step = steps.next()
    while (!step.done) step = steps.next()
    median = step.value.outputs[0]?.random?.percentiles.find(({ percent }) => percent === 50)?.figure.value ?? NaN
  }
  return { side: { run: (times) => { for (let i = 0; i < times; i += 1) analyse() } }, median: () => median }
}

function withMathjs(): { side: Side, median: () => number } {
  const compiled = math.compile('R/2*sqrt(C/L)')
  let median = NaN
  const analyse = () => {
    const values = new Float64Array(SAMPLES)
    const scope: Record<string, number> = {}
    for (let i = 0; i < SAMPLES; i += 1) {
      for (const [name, [nominal, part]] of Object.entries(PARTS)) scope[name] = nominal * (1 + part * (2 * Math.random() - 1))
      values[i] = compiled.evaluate(scope) as number
    }
    values.sort()
    const found = PERCENTS.map(percent => values[Math.round((SAMPLES - 1) * percent / 100)] ?? NaN)
    median = found[2] ?? NaN
  }
  return { side: { run: (times) => { for (let i = 0; i < times; i += 1) analyse() } }, median: () => median }
}

export function sampleRows(): BenchRow[] {
  const [a, b] = [ours(), withMathjs()]
  a.side.run(1)
  b.side.run(1)
  if (Math.abs(a.median() / b.median() - 1) > 0.002) throw new Error(`the medians differ: ${a.median()} and ${b.median()}`)
  return [compare('montecarlo-mathjs', 'mathjs compiled, sorted for percentiles', a.side, b.side, 5)]
}
