/**
 * Extremes over a box by search, with a fixed number of steps: all corners (up to ten variables),
 * points along the edges and inside, then line searches from the best of them. The golden section
 * is that of J. Kiefer, Proceedings of the American Mathematical Society 4 (1953) 502.
 */
import type { Variable } from '../graph/evaluation'
import { integerPower, powerOfTwo } from '../numeric/math'

export interface SearchRequest {
  variables: readonly Variable[]
  /** Indices of the variables to search; the others stay at the bases. */
  open: readonly number[]
  lowBase: readonly number[]
  highBase: readonly number[]
  evaluate: (values: readonly number[]) => number
  /** Cost of one evaluation, in steps. */
  effort: number
  /** For a long run: samples along the edges of boxes of more variables, and more of the best refined. */
  thorough?: boolean
}

interface Budget {
  /** Points along each edge, where there are few variables. */
  edgePoints: number
  /** Points inside the box. */
  inside: number
  /** Samples to refine, rounds for each, points and golden sections of a line search. */
  starts: number
  rounds: number
  grid: number
  golden: number
}

/** Cheap values are searched more finely than figures that take a hundred times as long. */
function budgetFor(effort: number): Budget {
  if (effort < CHEAP) return { edgePoints: 7, inside: 40, starts: 4, rounds: 4, grid: 7, golden: 40 }
  if (effort < COSTLY) return { edgePoints: 3, inside: 16, starts: 2, rounds: 3, grid: 5, golden: 24 }
  return { edgePoints: 0, inside: 6, starts: 1, rounds: 2, grid: 3, golden: 12 }
}

const THOROUGH: Budget = { edgePoints: 7, inside: 200, starts: 8, rounds: 6, grid: 7, golden: 40 }

const CHEAP = 1000
const COSTLY = 5000

/** Part of a line, or of a grid step, that tells which way it runs at its end. */
const NEAR = 1e-3

const CORNERS_UP_TO = 10
const EDGES_UP_TO = 3
const EDGES_UP_TO_THOROUGH = 6

interface Sample { position: number[], value: number }

export function searchExtremes(request: SearchRequest): { low: number, high: number } {
  const low = searchOne(request, request.lowBase, -1)
  const high = sameBase(request) ? searchOne(request, request.highBase, 1, low.samples) : searchOne(request, request.highBase, 1)
  return { low: low.best, high: high.best }
}

function sameBase({ lowBase, highBase }: SearchRequest): boolean {
  return lowBase.every((value, i) => value === highBase[i])
}

function searchOne(request: SearchRequest, base: readonly number[], sense: 1 | -1, known?: Sample[]): { best: number, samples: Sample[] } {
  const budget = request.thorough ? THOROUGH : budgetFor(request.effort)
  const evaluate = (position: readonly number[]) => request.evaluate(placed(request, base, position))
  const samples = known ?? sampleBox(request.open.length, budget, evaluate, request.thorough ? EDGES_UP_TO_THOROUGH : EDGES_UP_TO)
  const better = (a: number, b: number) => sense * a > sense * b
  const ranked = [...samples].sort((a, b) => sense * (b.value - a.value))
  let best = ranked[0]?.value ?? NaN
  // Where every edge of the box runs the same way as its parallels and nothing inside is better, one start will do.
  const starts = looksMonotone(ranked, samples) ? 1 : budget.starts
  for (const start of ranked.slice(0, starts)) {
    const refined = refine(start, budget, evaluate, better)
    if (better(refined, best)) best = refined
  }
  return { best, samples }
}

/** Values at a position in the unit cube of the open variables. */
function placed({ variables, open }: SearchRequest, base: readonly number[], position: readonly number[]): number[] {
  const values = [...base]
  open.forEach((index, k) => {
    const variable = variables[index]
    const t = position[k] ?? 0.5
    if (variable) values[index] = t === 0 ? variable.low : t === 1 ? variable.high : variable.low + (variable.high - variable.low) * t
  })
  return values
}

function sampleBox(n: number, budget: Budget, evaluate: (position: readonly number[]) => number, edgesUpTo: number): Sample[] {
  const samples: Sample[] = []
  const add = (position: number[]) => samples.push({ position, value: evaluate(position) })
  for (const corner of cornersOf(n)) add(corner)
  add(Array.from({ length: n }, () => 0.5))
  if (n <= edgesUpTo) for (const position of edgesOf(n, budget.edgePoints)) add(position)
  for (let k = 1; k <= budget.inside; k += 1) add(additive(n, k))
  return samples
}

/** All corners, or for many variables a fixed choice of them beside those with one variable turned. */
function cornersOf(n: number): number[][] {
  if (n <= CORNERS_UP_TO) return Array.from({ length: powerOfTwo(n) }, (_, k) => bits(k, n))
  const star = Array.from({ length: 2 * n + 2 }, (_, k) => Array.from({ length: n }, (__, i) => (k % 2) === 0 ? (i === k / 2 ? 1 : 0) : (i === (k - 1) / 2 ? 0 : 1)))
  return [...star, ...Array.from({ length: 512 }, (_, k) => additive(n, k + 1).map(t => t < 0.5 ? 0 : 1))]
}

function bits(k: number, n: number): number[] {
  return Array.from({ length: n }, (_, i) => Math.floor(k / powerOfTwo(i)) % 2)
}

/** Points along every edge of the cube. */
function edgesOf(n: number, perEdge: number): number[][] {
  const points: number[][] = []
  for (let axis = 0; axis < n; axis += 1) {
    for (let k = 0; k < powerOfTwo(n); k += 1) {
      const corner = bits(k, n)
      if (corner[axis] === 1) continue
      for (let j = 1; j <= perEdge; j += 1) points.push(corner.map((t, i) => i === axis ? j / (perEdge + 1) : t))
    }
  }
  return points
}

/**
 * Evenly spread points: the additive recurrence of the generalised golden ratio, k·(1/φ, 1/φ², …)
 * modulo 1 with φ^(n+1) = φ + 1.
 */
function additive(n: number, k: number): number[] {
  const root = generalGoldenRatio(n)
  let step = 1
  return Array.from({ length: n }, () => {
    step /= root
    const x = 0.5 + k * step
    return x - Math.floor(x)
  })
}

function generalGoldenRatio(n: number): number {
  let x = 1.5
  for (let k = 0; k < 60; k += 1) {
    const power = integerPower(x, n)
    x -= (power * x - x - 1) / ((n + 1) * power - 1)
  }
  return x
}

type Better = (a: number, b: number) => boolean

/** Whether the corners are ordered as those of a function that rises or falls in each variable, the best of all samples among them. */
function looksMonotone(ranked: readonly Sample[], samples: readonly Sample[]): boolean {
  const isCorner = (sample: Sample) => sample.position.every(x => x === 0 || x === 1)
  const [best] = ranked
  if (!best || !isCorner(best)) return false
  const corners = new Map(samples.filter(isCorner).map(sample => [sample.position.join(''), sample.value]))
  return best.position.every((_, axis) => {
    let [rises, falls] = [false, false]
    for (const [key, value] of corners) {
      const other = key[axis] === '0' ? corners.get(`${key.slice(0, axis)}1${key.slice(axis + 1)}`) : undefined
      if (other === undefined) continue
      if (other > value) rises = true
      if (other < value) falls = true
    }
    return !(rises && falls)
  })
}

/**
 * Line searches along each axis; once an extremum lies inside, where ridges run, also along the
 * diagonals of each pair. A start whose every line falls away from it takes a single round.
 */
function refine(start: Sample, budget: Budget, evaluate: (position: readonly number[]) => number, better: Better): number {
  const current = { position: [...start.position], value: start.value }
  const n = start.position.length
  let inside = false
  for (let round = 0; round < budget.rounds; round += 1) {
    const before = current.value
    for (const direction of inside ? [...axes(n), ...diagonals(n)] : axes(n)) {
      if (lineSearch(current, direction, budget, evaluate, better)) inside = true
    }
    if (current.value === before) break
  }
  return current.value
}

function axes(n: number): number[][] {
  return Array.from({ length: n }, (_, i) => Array.from({ length: n }, (__, j) => i === j ? 1 : 0))
}

/** Of many variables too many to be searched. */
const DIAGONALS_UP_TO = 5

function diagonals(n: number): number[][] {
  const found: number[][] = []
  if (n > DIAGONALS_UP_TO) return found
  for (let i = 0; i < n; i += 1) {
    for (let j = i + 1; j < n; j += 1) {
      for (const sign of [1, -1]) found.push(Array.from({ length: n }, (_, k) => k === i ? 1 : k === j ? sign : 0))
    }
  }
  return found
}

/** Moves to the best point of a line. Returns whether it lies between the ends of the line. */
function lineSearch(current: Sample, direction: readonly number[], budget: Budget, evaluate: (position: readonly number[]) => number, better: Better): boolean {
  const [from, to] = reach(current.position, direction)
  if (!(to > from)) return false
  const origin = current.position
  const at = (t: number) => origin.map((x, i) => Math.min(1, Math.max(0, x + (direction[i] ?? 0) * t)))
  const take = (t: number, value: number) => {
    if (better(value, current.value)) {
      current.position = at(t)
      current.value = value
    }
  }
  const step = (to - from) / (budget.grid + 1)
  let peak = { t: 0, value: current.value }
  for (let k = 0; k <= budget.grid + 1; k += 1) {
    const t = from + k * step
    const value = evaluate(at(t))
    take(t, value)
    if (better(value, peak.value)) peak = { t, value }
  }
  const inward = peak.t <= from ? step : peak.t >= to ? -step : 0
  // An end of the line is an extremum unless the first step inwards is better still.
  if (inward !== 0 && !better(evaluate(at(peak.t + inward * NEAR)), peak.value)) return false
  golden(Math.max(from, peak.t - step), Math.min(to, peak.t + step), budget.golden, t => evaluate(at(t)), better, take)
  return true
}

/** How far the position can move along the direction within the unit cube. */
function reach(position: readonly number[], direction: readonly number[]): [number, number] {
  let from = -Infinity
  let to = Infinity
  position.forEach((x, i) => {
    const d = direction[i] ?? 0
    if (d === 0) return
    const ends = d > 0 ? [-x / d, (1 - x) / d] : [(1 - x) / d, -x / d]
    from = Math.max(from, ends[0] ?? from)
    to = Math.min(to, ends[1] ?? to)
  })
  return [from, to]
}

const GOLDEN = 0.6180339887498949

function golden(from: number, to: number, steps: number, f: (t: number) => number, better: Better, take: (t: number, value: number) => void): void {
  let [a, b] = [from, to]
  let [x, y] = [b - GOLDEN * (b - a), a + GOLDEN * (b - a)]
  let [fx, fy] = [f(x), f(y)]
  for (let k = 0; k < steps; k += 1) {
    take(x, fx)
    take(y, fy)
    if (better(fx, fy)) {
      [b, y, fy] = [y, x, fx]
      x = b - GOLDEN * (b - a)
      fx = f(x)
    }
    else {
      [a, x, fx] = [x, y, fy]
      y = a + GOLDEN * (b - a)
      fy = f(y)
    }
  }
}
