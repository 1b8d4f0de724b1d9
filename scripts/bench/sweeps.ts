/** Sweeping transfer functions, against mathjs compiled and against C on 128-bit vectors. */
import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { all, create } from 'mathjs'
import type { Complex } from 'mathjs'
import { sampleResponse } from '../../shared/engine/transfer'
import type { Rational } from '../../shared/engine/transfer'
import { compare } from './interleave'
import type { BenchRow, Side } from './interleave'

const math = create(all ?? {})
const POINTS = 100_000

/** Angular frequencies over five decades, rad/s. */
const OMEGA = Float64Array.from({ length: POINTS }, (_, i) => 1e3 * 10 ** (5 * i / (POINTS - 1)))

/** Coefficients of numerator and denominator, ascending. */
interface Ratio { above: number[], below: number[] }

/** A damped second-order low-pass at 100 krad/s, and a Butterworth low-pass of order seven there. */
const SECOND: Ratio = { above: [1], below: [1, 0.4e-5, 1e-10] }
const BUTTERWORTH_7 = [1, 4.493959207434933, 10.097834679044611, 14.591793886479543, 14.591793886479543, 10.097834679044611, 4.493959207434933, 1]
const SEVENTH: Ratio = { above: [1], below: BUTTERWORTH_7.map((a, k) => a * 1e-5 ** k) }

const asRational = ({ above, below }: Ratio): Rational => ({
  gain: 1, origin: 0,
  numerator: above.length > 1 ? [{ coefficients: above, power: 1 }] : [],
  denominator: [{ coefficients: below, power: 1 }],
})

function mathjsText({ above, below }: Ratio): string {
  const polynomial = (p: number[]) => p.map((a, k) => k === 0 ? `${a}` : `${a}*s^${k}`).join(' + ')
  return `(${polynomial(above)})/(${polynomial(below)})`
}

function ours(ratio: Ratio, gain: Float64Array, phase: Float64Array): Side {
  const r = asRational(ratio)
  return {
    run: (times) => {
      for (let i = 0; i < times; i += 1) sampleResponse(r, OMEGA, gain, phase)
    },
  }
}

function withMathjs(ratio: Ratio, gain: Float64Array, phase: Float64Array): Side {
  const compiled = math.compile(mathjsText(ratio))
  return {
    run: (times) => {
      for (let n = 0; n < times; n += 1) {
        for (let i = 0; i < POINTS; i += 1) {
          const h = compiled.evaluate({ s: math.complex(0, OMEGA[i] ?? 0) }) as Complex
          gain[i] = 20 * Math.log10(h.toPolar().r)
          phase[i] = h.toPolar().phi * 180 / Math.PI
        }
      }
    },
  }
}

/** The same gains, and the same phases up to whole turns; else the comparison says nothing. */
function agree(what: string, gain: Float64Array, phase: Float64Array, theirGain: Float64Array, theirPhase: Float64Array): void {
  for (let i = 0; i < POINTS; i += 997) {
    const turn = Math.abs(((phase[i] ?? 0) - (theirPhase[i] ?? 0)) % 360)
    if (Math.abs((gain[i] ?? 0) - (theirGain[i] ?? 0)) > 1e-8 || Math.min(turn, 360 - turn) > 1e-7) throw new Error(`${what} differs at point ${i}`)
  }
}

function mathjsRow(name: string, ratio: Ratio): BenchRow {
  const [gain, phase, theirGain, theirPhase] = [0, 0, 0, 0].map(() => new Float64Array(POINTS)) as [Float64Array, Float64Array, Float64Array, Float64Array]
  const [a, b] = [ours(ratio, gain, phase), withMathjs(ratio, theirGain, theirPhase)]
  a.run(1)
  b.run(1)
  agree(name, gain, phase, theirGain, theirPhase)
  return compare(name, 'mathjs compiled', a, b, 5)
}

/** Milliseconds of one sweep, timed by the program itself, its results left in a file for comparison. */
function cSide(binary: string, { below }: Ratio, file: string): number {
  return Number(execFileSync(binary, [file, ...below.map(String)], { encoding: 'utf8' }))
}

const median = (values: number[]) => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN

function cRow(name: string, binary: string, folder: string, ratio: Ratio): BenchRow {
  const [gain, phase] = [new Float64Array(POINTS), new Float64Array(POINTS)]
  const side = ours(ratio, gain, phase)
  side.run(20)
  const file = join(folder, `${name}.bin`)
  const samples: [number[], number[]] = [[], []]
  for (let round = 0; round < 9; round += 1) {
    const from = performance.now()
    side.run(5)
    samples[0].push((performance.now() - from) / 5)
    samples[1].push(cSide(binary, ratio, file))
  }
  const bytes = readFileSync(file)
  const numbers = new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength))
  agree(name, gain, phase, numbers.subarray(0, POINTS), numbers.subarray(POINTS))
  const [ours_ms, peer_ms] = [median(samples[0]), median(samples[1])]
  return { name, ours_ms, peer: 'C, gcc -O3 -msse4.2 -mno-avx', peer_ms, ratio: peer_ms / ours_ms }
}

function cRows(): BenchRow[] {
  const folder = mkdtempSync(join(tmpdir(), 'sweep-'))
  try {
    const binary = join(folder, 'sweep')
    try {
      execFileSync('gcc', ['-O3', '-msse4.2', '-mno-avx', '-o', binary, 'scripts/bench/sweep.c', '-lm'], { stdio: ['ignore', 'ignore', 'pipe'] })
    }
    catch {
      console.log('No C compiler here: the rows sweep2-c128 and sweep7-c128 are left out.')
      return []
    }
    return [cRow('sweep2-c128', binary, folder, SECOND), cRow('sweep7-c128', binary, folder, SEVENTH)]
  }
  finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

export function sweepRows(): BenchRow[] {
  return [mathjsRow('sweep2-mathjs', SECOND), mathjsRow('sweep7-mathjs', SEVENTH), ...cRows()]
}
