/**
 * Numbers drawn at random, the same on every machine: the counter-based generator Philox 4×32 with
 * ten rounds. J. K. Salmon, M. A. Moraes, R. O. Dror, D. E. Shaw, "Parallel random numbers: as easy
 * as 1, 2, 3", SC11 (2011). A draw depends on its counter and the seed only, not on those before it.
 */

const HALF = 65536
/** Multipliers in halves of 16 bits, and the steps of the key. */
const [M0_HIGH, M0_LOW] = [0xD251, 0x1F53]
const [M1_HIGH, M1_LOW] = [0xCD9E, 0x8D57]
const [WEYL_0, WEYL_1] = [0x9E3779B9, 0xBB67AE85]
const ROUNDS = 10

export type Block = [number, number, number, number]

/** The last block; a draw makes no object. */
const words = new Uint32Array(4)

/** Fills the block for the counter (a, b, c, d) and the key (k, l); every partial product is below 2³² and every sum below 2⁵⁰, so exact. */
function fill(a: number, b: number, c: number, d: number, k: number, l: number): void {
  for (let round = 0; round < ROUNDS; round += 1) {
    const [a0, a1, c0, c1] = [a & 0xffff, a >>> 16, c & 0xffff, c >>> 16]
    const smallA = M0_LOW * a0
    const middleA = M0_HIGH * a0 + M0_LOW * a1 + (smallA >>> 16)
    const smallC = M1_LOW * c0
    const middleC = M1_HIGH * c0 + M1_LOW * c1 + (smallC >>> 16)
    const highA = M0_HIGH * a1 + Math.floor(middleA / HALF)
    const highC = M1_HIGH * c1 + Math.floor(middleC / HALF)
    a = (highC ^ b ^ k) >>> 0
    c = (highA ^ d ^ l) >>> 0
    b = (middleC * HALF + (smallC & 0xffff)) >>> 0
    d = (middleA * HALF + (smallA & 0xffff)) >>> 0
    k = (k + WEYL_0) >>> 0
    l = (l + WEYL_1) >>> 0
  }
  words[0] = a
  words[1] = b
  words[2] = c
  words[3] = d
}

/** Four words of 32 bits for a counter of four words and a key of two. */
export function philox([a, b, c, d]: Readonly<Block>, [k, l]: readonly [number, number]): Block {
  fill(a, b, c, d, k, l)
  return [words[0] ?? 0, words[1] ?? 0, words[2] ?? 0, words[3] ?? 0]
}

/** A number strictly between 0 and 1, of 52 bits, for a seed, a sample and a stream within it (all whole, below 2³²). */
export function uniformAt(seed: number, sample: number, stream: number): number {
  fill(sample, stream, 0, 0, seed, 0)
  return ((words[0] ?? 0) * 1048576 + ((words[1] ?? 0) >>> 12) + 0.5) / 4503599627370496
}
