/** Two ways of doing the same work, timed in turns in one run: on a noisy machine only their ratio says something. */
import { mkdirSync, writeFileSync } from 'node:fs'

export interface Side {
  /** Does the work `times` times. */
  run: (times: number) => void
}

export interface BenchRow { name: string, ours_ms: number, peer: string, peer_ms: number, ratio: number }

const ROUNDS = 15
/** Least duration of one measurement, ms; quick work is repeated until it takes that long. */
const LEAST = 8
/** Each side runs at least this long before anything is measured, ms: what is measured is warm. */
const WARM = 400

/** One side's garbage is not to be cleared in the other's time. */
const clear = (globalThis as { gc?: (options: { type: 'minor' }) => void }).gc ?? (() => {})

function timed(side: Side, times: number): number {
  clear({ type: 'minor' })
  const from = performance.now()
  side.run(times)
  return (performance.now() - from) / times
}

function repetitions(side: Side): number {
  const from = performance.now()
  while (performance.now() - from < WARM) side.run(1)
  let times = 1
  while (times < 1e6) {
    const start = performance.now()
    side.run(times)
    if (performance.now() - start >= LEAST) return times
    times *= 2
  }
  return times
}

const median = (values: number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN

/** Medians of each side in milliseconds for one piece of work; ratio is peer over ours. */
export function compare(name: string, peer: string, ours: Side, theirs: Side, rounds = ROUNDS): BenchRow {
  const times = [repetitions(ours), repetitions(theirs)] as const
  const samples: [number[], number[]] = [[], []]
  for (let round = 0; round < rounds; round += 1) {
    samples[0].push(timed(ours, times[0]))
    samples[1].push(timed(theirs, times[1]))
  }
  const [ours_ms, peer_ms] = [median(samples[0]), median(samples[1])]
  return { name, ours_ms, peer, peer_ms, ratio: peer_ms / ours_ms }
}

const shown = (x: number) => x >= 100 ? x.toFixed(0) : x.toPrecision(3)

export function printRow({ name, ours_ms, peer, peer_ms, ratio }: BenchRow): void {
  console.log(`${name.padEnd(18)} ${shown(ours_ms).padStart(10)} ms ${shown(peer_ms).padStart(10)} ms ${shown(ratio).padStart(8)} ×   ${peer}`)
}

export function saveRows(file: string, rows: readonly BenchRow[]): void {
  mkdirSync('.bench', { recursive: true })
  writeFileSync(`.bench/${file}`, `${JSON.stringify(rows, null, 2)}\n`)
}
