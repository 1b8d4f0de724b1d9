/** Propagation and random samples against the worked examples of JCGM 100:2008 and JCGM 101:2008 (data/gum.json). */
import { describe, expect, it } from 'vitest'
import data from '../data/gum.json'
import { output } from './analyse'

function reference(start: string): unknown {
  const record = data.records.find(found => found.quantity.startsWith(start))
  if (!record) throw new Error(`no record ${start}`)
  return record.value
}

const off = (found: number | undefined, expected: number) => Math.abs((found ?? NaN) - expected)
const normal = (...names: string[]) => names.map(name => ({ name, distribution: 'normal' as const }))

it('gives the uncertainty of the gauge block of H.1, to first order and with the second order in the samples', () => {
  const inputs = reference('GUM H.1 inputs') as Record<string, [number, number, number | null]>
  const line = (name: string, key: string) => `${name} = ${inputs[key]?.[0]} ± ${3 * (inputs[key]?.[1] ?? NaN)}`
  const lines = [line('l_S', 'lS'), line('d', 'd'), line('a_d', 'delta_alpha'), line('t', 'theta'), line('a_S', 'alpha_S'), line('t_d', 'delta_theta')]
  const found = output(lines, 'l_S + d - l_S*(a_d*t + a_S*t_d)', { inputs: normal('l_S', 'd', 'a_d', 't', 'a_S', 't_d') })
  expect(off(found.rootSumSquare?.standard.value, reference('GUM H.1 u_c full precision') as number)).toBeLessThan(1e-5)
  expect(off(found.nominal?.value, reference('GUM H.1 published l') as number)).toBeLessThan(0.5)
  // All normal, the second-order variance is exact; standard error 34/sqrt(2 n) = 0.076, four of them.
  expect(off(found.random?.deviation.value, reference('GUM H.1 u_c second order full') as number)).toBeLessThan(0.31)
})

describe('the additive model of JCGM 101, 9.2', () => {
  const names = ['x_1', 'x_2', 'x_3', 'x_4']
  const interval = (limits: readonly string[], inputs: ReturnType<typeof normal>) => {
    const found = output(names.map((name, i) => `${name} = 0 V ± ${limits[i]} V`), names.join(' + '), { inputs })
    const at = (percent: number) => found.random?.percentiles.find(one => one.percent === percent)?.figure.value
    return { found, low: at(2.5), high: at(97.5) }
  }
  const root3 = '1.7320508075688772'

  it.each([
    ['9.2.2', ['3', '3', '3', '3'], normal(...names), 'JCGM 101 9.2.2', 0.075],
    ['9.2.3', [root3, root3, root3, root3], [], 'JCGM 101 9.2.3', 0.075],
  ] as const)('%s', (_, limits, inputs, record, tolerance) => {
    const { u, interval: [low, high] } = reference(record) as { u: number, interval: [number, number] }
    const found = interval(limits, [...inputs])
    expect(off(found.found.rootSumSquare?.standard.value, u)).toBeLessThan(1e-9)
    expect(off(found.found.random?.deviation.value, u)).toBeLessThan(0.018)
    expect(off(found.low, low)).toBeLessThan(tolerance)
    expect(off(found.high, high)).toBeLessThan(tolerance)
  })

  it('9.2.4, where one rectangular distribution outweighs the others', () => {
    const { interval_MCM: [low, high] } = reference('JCGM 101 9.2.4') as { interval_MCM: [number, number] }
    const found = interval([root3, root3, root3, '17.320508075688775'], [])
    expect(off(found.low, low)).toBeLessThan(0.12)
    expect(off(found.high, high)).toBeLessThan(0.12)
  })
})

describe('comparison loss, JCGM 101, 9.4.2', () => {
  it.each([['0', 0], ['0.01', 0.01], ['0.05', 0.05]])('about x_1 = %s', (text, x) => {
    const { y, u } = reference(`JCGM 101 9.4.2 comparison loss Y=X1^2+X2^2, x2=0, u=0.005, r=0, x1=${text}:`) as { y: number, u: number }
    const found = output([`x_1 = ${x} ± 0.015`, 'x_2 = 0 ± 0.015'], 'x_1^2 + x_2^2', { inputs: normal('x_1', 'x_2') })
    // Four standard errors of the mean, and the published rounding.
    expect(off((found.random?.mean.value ?? NaN) * 1e6, y)).toBeLessThan(4 * u / Math.sqrt(100_000) + 0.5)
    expect(off((found.random?.deviation.value ?? NaN) * 1e6, u)).toBeLessThan(0.02 * u + 0.5)
    if (x === 0) expect(off(found.rootSumSquare?.standard.value, reference('Monte Carlo trap') as number)).toBeLessThan(1e-15)
  })
})
