/** The generator against its authors' known answers, the quantiles against SciPy. */
import { describe, expect, it } from 'vitest'
import { philox, uniformAt } from '../../../shared/engine/numeric/chance'
import type { Block } from '../../../shared/engine/numeric/chance'
import { normalQuantile, normalTail } from '../../../shared/engine/numeric/normal'

const ALL = 0xFFFFFFFF

describe('the counter-based generator', () => {
  // Known answers `philox4x32 10` of the Random123 distribution (kat_vectors); from memory.
  const known: [Block, [number, number], Block][] = [
    [[0, 0, 0, 0], [0, 0], [0x6627E8D5, 0xE169C58D, 0xBC57AC4C, 0x9B00DBD8]],
    [[ALL, ALL, ALL, ALL], [ALL, ALL], [0x408F276D, 0x41C83B0E, 0xA20BC7C6, 0x6D5451FD]],
    [[0x243F6A88, 0x85A308D3, 0x13198A2E, 0x03707344], [0xA4093822, 0x299F31D0], [0xD16CFE09, 0x94FDCCEB, 0x5001E420, 0x24126EA1]],
  ]
  it.each(known)('gives for %o and %o the published words', (counter, key, words) => {
    expect(philox(counter, key)).toEqual(words)
  })

  it('stays strictly between 0 and 1 and is even', () => {
    const draws = Array.from({ length: 20_000 }, (_, i) => uniformAt(7, i, 3))
    expect(Math.min(...draws)).toBeGreaterThan(0)
    expect(Math.max(...draws)).toBeLessThan(1)
    // Standard error of the mean of n uniform draws: 1/sqrt(12 n) = 0.00204; four of them.
    expect(Math.abs(draws.reduce((a, b) => a + b) / draws.length - 0.5)).toBeLessThan(0.0082)
  })
})

describe('quantiles of the normal distribution', () => {
  // scipy.stats.norm.ppf, SciPy 1.17.1.
  it.each([
    [1e-12, -7.034483825301131], [1e-5, -4.264890793922825], [0.00135, -2.9999769927033935], [0.025, -1.9599639845400545],
    [0.3, -0.5244005127080409], [0.5, 0], [0.7, 0.5244005127080407], [0.975, 1.959963984540054], [0.99999, 4.264890793923841],
  ])('at %d', (p, expected) => {
    expect(Math.abs(normalQuantile(p) - expected)).toBeLessThanOrEqual(4e-15 * Math.abs(expected))
  })

  // scipy.stats.norm.sf(3), .sf(2)
  it.each([[3, 0.0013498980316300933], [2, 0.022750131948179195]])('the tail beyond %d', (x, expected) => {
    expect(Math.abs(normalTail(x) / expected - 1)).toBeLessThan(1e-12)
  })
})
