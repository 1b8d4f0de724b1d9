/** The three methods against values computed with SciPy (data/tolerance.json), closed forms and brute force. */
import { describe, expect, it } from 'vitest'
import { createSheetEngine } from '../../../shared/engine'
import type { ToleranceRequest } from '../../../shared/engine'
import { uniformAt } from '../../../shared/engine/numeric/chance'
import data from '../data/tolerance.json'
import { inputOf, settings } from '../language/support'
import { analyse, output, REQUEST } from './analyse'

function reference(start: string): unknown {
  const record = data.records.find(found => found.quantity.startsWith(start))
  if (!record) throw new Error(`no record ${start}`)
  return record.value
}

const close = (found: number | undefined, expected: number, relative: number) => expect(Math.abs((found ?? NaN) / expected - 1)).toBeLessThanOrEqual(relative)

const LC = ['L = 10 mH ± 5 %', 'C = 100 nF ± 10 %', 'f = 1/(2*pi*sqrt(L*C)) to Hz']
const DIVIDER = ['R_1 = 10 kohm ± 5 %', 'R_2 = 10 kohm ± 5 %', 'V_o = (10 V)*R_2/(R_1 + R_2)']
const RESONANT = ['R = 5 ohm ± 1 %', 'L = 10 mH ± 5 %', 'C = 100 nF ± 10 %', 'H(s) = 1/(L*C*s^2 + R*C*s + 1)']

describe('a natural frequency', () => {
  const found = output(LC, 'f')

  it('at worst case', () => {
    const [low, high] = reference('TOL-A worst case f0 (corners)') as [number, number]
    close(found.worst?.low.value, low, 1e-12)
    close(found.worst?.high.value, high, 1e-12)
    expect(found.worst?.method).toBe('proved')
  })

  it('by root-sum-square and by the law of propagation', () => {
    const rss = found.rootSumSquare
    close(rss && (rss.high.value - rss.low.value) / 2, reference('TOL-A root-sum-square') as number, 1e-9)
    close(rss?.standard.value, reference('TOL-A first-order (GUM)') as number, 1e-9)
    expect(rss?.contributions.map(row => row.names)).toEqual([['C'], ['L']])
    for (const row of rss?.contributions ?? []) close(row.sensitivity, -0.5, 1e-7)
    close(rss?.contributions[0]?.share, 0.8, 1e-7)
  })

  it('by random samples', () => {
    close(found.random?.mean.value, reference('TOL-A exact mean') as number, 4.1e-4)
    close(found.random?.deviation.value, reference('TOL-A exact standard deviation') as number, 0.01)
    const quantiles = reference('TOL-A exact quantiles') as Record<string, number>
    const percentiles = found.random?.percentiles ?? []
    for (const [p, expected] of Object.entries(quantiles)) close(percentiles.find(({ percent }) => Math.abs(percent - 100 * Number(p)) < 1e-9)?.figure.value, expected, 0.003)
    expect(found.random?.histogram.counts.reduce((a, b) => a + b)).toBe(100_000)
  })
})

it('finds the worst inside the box, also with temperature', () => {
  const found = output(RESONANT, 'magnitude(H, 5032.921210448703 Hz)', { methods: ['worst case'] })
  close(found.worst?.high.value, reference('TOL-C trap: true maximum') as number, 1e-8)
  const warm = output(RESONANT, 'magnitude(H, 5032.921210448703 Hz)', {
    methods: ['worst case'], temperature: { reference: 25, low: 25, high: 35 },
    inputs: [{ name: 'R', distribution: 'uniform', coefficient: { low: -100, high: 0 } }],
  })
  // sqrt(1 + (w L/R)²) with L + 5 % and R − 1 % − 10 K × 100 ppm/K; w² L C = 1 at the nominal values.
  const ratio = Math.sqrt(0.01 / 1e-7) * 1.05 / (5 * 0.99 * 0.999)
  close(warm.worst?.high.value, Math.sqrt(1 + ratio * ratio), 1e-8)
})

describe('the worst case of random boxes', () => {
  // Brute force: the formula written in JavaScript over 21 places of a shared batch position, of a second part and of the temperature.
  it.each(Array.from({ length: 12 }, (_, seed) => seed))('is no less than brute force finds, box %i', (seed) => {
    const draw = (stream: number) => uniformAt(seed, 0, stream)
    const [a, b, c] = [1 + draw(0), 1 + draw(1), 1 + draw(2)]
    const [p, q, r] = [2 + 20 * draw(3), 2 + 20 * draw(4), 2 + 20 * draw(5)]
    const slope = 1000 * draw(6)
    const lines = [`a = ${a} ± ${p} %`, `b = ${b} ± ${q} %`, `c = ${c} ± ${r} %`]
    const found = output(lines, 'a*b*(3 - c) - c^2*(a - b)^2', {
      methods: ['worst case'], temperature: { reference: 25, low: 0, high: 100 },
      inputs: [{ name: 'a', distribution: 'uniform', batch: 'x' }, { name: 'b', distribution: 'uniform', batch: 'x' }, { name: 'c', distribution: 'uniform', coefficient: { low: slope, high: slope } }],
    })
    const places = Array.from({ length: 21 }, (_, i) => i / 10 - 1)
    const values = places.flatMap(t => places.flatMap(u => places.map((w) => {
      const [x, y] = [a * (1 + t * p / 100), b * (1 + t * q / 100)]
      const z = c * (1 + u * r / 100) * (1 + slope * 1e-6 * (25 + 50 * w))
      return x * y * (3 - z) - z * z * (x - y) * (x - y)
    })))
    const [low, high] = [Math.min(...values), Math.max(...values)]
    const [foundLow, foundHigh] = [found.worst?.low.value ?? NaN, found.worst?.high.value ?? NaN]
    expect(foundHigh).toBeGreaterThanOrEqual(high - 1e-9 * Math.abs(high))
    expect(foundLow).toBeLessThanOrEqual(low + 1e-9 * Math.abs(low))
    // Between two places brute force misses little.
    expect(foundHigh - foundLow).toBeLessThan((high - low) * 1.02)
  })
})

describe('parts of one batch', () => {
  const matched = { inputs: ['R_1', 'R_2'].map(name => ({ name, distribution: 'normal' as const, batch: 'network' })), samples: 1000 }

  it('leave a divider as it is', () => {
    const found = output(DIVIDER, 'V_o', matched)
    close(found.worst?.low.value, 5, 1e-12)
    close(found.worst?.high.value, 5, 1e-12)
    expect(found.random?.deviation.value).toBeLessThan(1e-12)
    expect(found.rootSumSquare?.standard.value).toBeLessThan(1e-9)
  })

  it('which independent ones do not', () => {
    close(output(DIVIDER, 'V_o').random?.deviation.value, reference('TOL-D divider: exact sd') as number, 0.01)
  })
})

describe('distributions', () => {
  // Standard deviations of a part with limits ± 3 of its own: normal 1; truncated scipy.stats.truncnorm.std(-3, 3) = 0.98657839…
  it.each([['normal', 1], ['truncated normal', 0.9865783925581086], ['uniform', Math.sqrt(3)]] as const)('%s', (distribution, expected) => {
    const found = output(['x = 100 V ± 3 V'], 'x', { inputs: [{ name: 'x', distribution }] })
    close(found.rootSumSquare?.standard.value, expected, 1e-9)
    // Relative standard error of a standard deviation is at most 1/sqrt(2 n) = 0.22 %; four of them.
    close(found.random?.deviation.value, expected, 0.009)
    const outside = distribution === 'normal'
    expect((found.random?.histogram.high.value ?? 0) > 103).toBe(outside)
  })
})

describe('temperature and ageing', () => {
  const inputs = [{ name: 'R', distribution: 'uniform' as const, coefficient: { low: -50, high: 50 }, ageing: { low: -0.5, high: 0.5 } }]
  const found = output(['R = 1 kohm ± 1 %'], 'R', { inputs, temperature: { reference: 25, low: -40, high: 85 } })

  it('add to the initial tolerance at worst case', () => {
    // 65 K below the reference is further than 60 K above.
    close(found.worst?.high.value, 1000 * 1.01 * (1 + 65 * 50e-6) * 1.005, 1e-12)
    close(found.worst?.low.value, 1000 * 0.99 * (1 - 65 * 50e-6) * 0.995, 1e-12)
  })

  it('stand in the table by themselves', () => {
    expect(found.rootSumSquare?.contributions.map(row => [row.cause, Number(row.effect.value.toPrecision(6))])).toEqual([['tolerance', 10], ['ageing', 5], ['temperature', 3.25]])
  })

  it('widen what is drawn', () => {
    // Variances of independent uniform factors; mean square of the rise (65² − 65·60 + 60²)/3.
    const variance = (10 * 10 + 5 * 5) / 3 + (0.05 * 0.05) / 3 * (65 * 65 - 65 * 60 + 60 * 60) / 3
    close(found.random?.deviation.value, Math.sqrt(variance), 0.009)
    close(found.rootSumSquare?.standard.value, Math.sqrt(variance), 1e-9)
  })
})

describe('the yield of a requirement', () => {
  it('is the part of the samples that meet it', () => {
    const found = output(['x = 10 V ± 1 V'], 'x <= 10.5 V')
    expect(found.kind).toBe('requirement')
    const { low, high } = found.random?.yield ?? { low: 1, high: 0 }
    // Three quarters of a uniform distribution; the interval is of 95 %, four standard errors are 0.0055.
    expect(low).toBeGreaterThan(0.7445)
    expect(high).toBeLessThan(0.7555)
    close(found.worst?.low.value, -0.5, 1e-12)
  })
})

describe('repetition', () => {
  it('gives the same figures for the same seed, whatever else is asked', () => {
    const [alone] = analyse(LC, ['f'], { samples: 500 }).outputs
    const [, beside] = analyse(LC, ['L', 'f'], { samples: 500 }).outputs
    expect(JSON.stringify({ ...alone, id: '' })).toBe(JSON.stringify({ ...beside, id: '' }))
    expect(output(LC, 'f', { samples: 500, seed: 2 }).random?.mean.value).not.toBe(alone?.random?.mean.value)
  })

  it('can be left between two slices', () => {
    const engine = createSheetEngine(settings)
    engine.evaluate(inputOf(LC))
    const run = engine.tolerance({ ...REQUEST, outputs: [{ id: 'o', source: 'f' }] })
    const reports = [run.next(), run.next(), run.next()].map(step => step.done ? undefined : step.value.done)
    expect(reports.every((done, i) => done !== undefined && (i === 0 || done > (reports[i - 1] ?? 0)))).toBe(true)
    expect(engine.evaluateExpression('f').status).toBe('ok')
  })
})

describe('what cannot be analysed', () => {
  it.each([
    ['f = 3', 'definition-place'], ['y', 'unknown-name'], ['', 'tolerance-output'], ['[f, f]', 'tolerance-output'], ['3 V', 'tolerance-output'], ['f +', 'syntax'],
  ])('%s', (source, code) => {
    expect(output(LC, source, { samples: 100 }).problems.map(problem => problem.code)).toEqual([code])
  })

  it.each([
    [{ samples: 10 }, 'tolerance-samples'], [{ samples: 1e6 }, 'tolerance-samples'], [{ seed: -1 }, 'tolerance-seed'], [{ methods: [] }, 'tolerance-methods'],
    [{ inputs: [{ name: 'f', distribution: 'uniform' }] }, 'tolerance-input'], [{ inputs: [{ name: 'L', distribution: 'normal', sigmas: 0 }] }, 'tolerance-input'],
    [{ inputs: [{ name: 'L', distribution: 'normal', coefficient: { low: 0, high: 20 } }] }, 'tolerance-input'],
    [{ temperature: { reference: 25, low: 85, high: -40 } }, 'tolerance-temperature'],
  ] as [Partial<ToleranceRequest>, string][])('%o', (more, code) => {
    expect(analyse(LC, ['f'], more).problems.map(problem => problem.code)).toEqual([code])
  })
})
