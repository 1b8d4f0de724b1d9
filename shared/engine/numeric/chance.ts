/**
 * Numbers drawn at random, the same on every machine: the counter-based generator Philox 4×32 with
 * ten rounds. J. K. Salmon, M. A. Moraes, R. O. Dror, D. E. Shaw, "Parallel random numbers: as easy
 * as 1, 2, 3", SC11 (2011). A draw depends on its counter and the seed only, not on those before it.
 */

const WORD = 4294967296
const HALF = 65536
const MULTIPLIER = [0xD2511F53, 0xCD9E8D57] as const
const WEYL = [0x9E3779B9, 0xBB67AE85] as const
const ROUNDS = 10

export type Block = [number, number, number, number]

/** High and low word of a product of two words; each partial product is below 2⁴⁸, so exact. */
function product(a: number, b: number): [number, number] {
  const upper = Math.floor(b / HALF)
  const low = a * (b - upper * HALF)
  const carry = Math.floor(low / HALF)
  const middle = a * upper + carry
  const high = Math.floor(middle / HALF)
  return [high, (middle - high * HALF) * HALF + (low - carry * HALF)]
}

const exclusive = (a: number, b: number, c: number) => (a ^ b ^ c) >>> 0

/** Four words of 32 bits for a counter of four words and a key of two. */
export function philox(counter: Readonly<Block>, key: readonly [number, number]): Block {
  let [a, b, c, d] = counter
  let [k, l] = key
  for (let round = 0; round < ROUNDS; round += 1) {
    const [highA, lowA] = product(MULTIPLIER[0], a)
    const [highC, lowC] = product(MULTIPLIER[1], c);
    [a, b, c, d] = [exclusive(highC, b, k), lowC, exclusive(highA, d, l), lowA]
    k = (k + WEYL[0]) % WORD
    l = (l + WEYL[1]) % WORD
  }
  return [a, b, c, d]
}

/** A number strictly between 0 and 1, of 52 bits, for a seed, a sample and a stream within it (all whole, below 2³²). */
export function uniformAt(seed: number, sample: number, stream: number): number {
  const [a, b] = philox([sample, stream, 0, 0], [seed, 0])
  return (a * 1048576 + Math.floor(b / 4096) + 0.5) / 4503599627370496
}
