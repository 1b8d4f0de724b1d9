/**
 * Eigenvalues of a real square matrix: balancing, reduction to Hessenberg form by elimination, and the shifted
 * QR iteration with double steps (J. G. F. Francis, "The QR transformation", The Computer Journal 4 (1961);
 * J. H. Wilkinson and C. Reinsch, Handbook for Automatic Computation II, contributions II/11, II/13, II/14).
 */
import type { Complex } from './complex'
import { EPSILON } from './math'

/** Rows of a square matrix; it is overwritten. */
export type SquareMatrix = Float64Array[]

const STEPS = 90

/** Scales rows and columns by powers of two until their norms agree. */
function balance(a: SquareMatrix): void {
  const n = a.length
  for (let done = false, round = 0; !done && round < 100; round++) {
    done = true
    for (let i = 0; i < n; i++) {
      let row = 0
      let column = 0
      for (let j = 0; j < n; j++) {
        if (j === i) continue
        column += Math.abs(a[j]![i]!)
        row += Math.abs(a[i]![j]!)
      }
      const f = balancingFactor(row, column)
      if (f === 1) continue
      done = false
      for (let j = 0; j < n; j++) a[i]![j]! /= f
      for (let j = 0; j < n; j++) a[j]![i]! *= f
    }
  }
}

function balancingFactor(row: number, column: number): number {
  if (row === 0 || column === 0) return 1
  let f = 1
  for (; column * f * f < row / 2; f *= 2);
  for (; column * f * f >= row * 2; f /= 2);
  return (column * f * f + row) / f < 0.95 * (column + row) ? f : 1
}

/** Elimination with the largest pivot of each column below the diagonal. */
function toHessenberg(a: SquareMatrix): void {
  const n = a.length
  for (let m = 1; m < n - 1; m++) {
    let pivot = m
    for (let i = m; i < n; i++) if (Math.abs(a[i]![m - 1]!) > Math.abs(a[pivot]![m - 1]!)) pivot = i
    const x = a[pivot]![m - 1]!
    if (x === 0) continue
    if (pivot !== m) exchange(a, pivot, m)
    for (let i = m + 1; i < n; i++) {
      const y = a[i]![m - 1]! / x
      if (y === 0) continue
      for (let j = m - 1; j < n; j++) a[i]![j]! -= y * a[m]![j]!
      a[i]![m - 1] = 0
      for (let j = 0; j < n; j++) a[j]![m]! += y * a[j]![i]!
    }
  }
}

function exchange(a: SquareMatrix, i: number, j: number): void {
  const row = a[i]!
  a[i] = a[j]!
  a[j] = row
  for (const line of a) {
    const x = line[i]!
    line[i] = line[j]!
    line[j] = x
  }
}

/** First row of the block at the end of which `last` stands. */
function blockStart(a: SquareMatrix, last: number, norm: number): number {
  for (let l = last; l >= 1; l--) {
    const size = Math.abs(a[l - 1]![l - 1]!) + Math.abs(a[l]![l]!)
    if (Math.abs(a[l]![l - 1]!) <= EPSILON * (size === 0 ? norm : size)) {
      a[l]![l - 1] = 0
      return l
    }
  }
  return 0
}

/** Both eigenvalues of the last 2×2 block, whose shifted diagonal ends in y, x and whose product beside it is w. */
function pairOf(y: number, x: number, w: number, shift: number): [Complex, Complex] {
  const p = 0.5 * (y - x)
  const q = p * p + w
  const root = Math.sqrt(Math.abs(q))
  const base = x + shift
  if (q < 0) return [{ re: base + p, im: root }, { re: base + p, im: -root }]
  const z = p >= 0 ? p + root : p - root
  return [{ re: base + z, im: 0 }, { re: z === 0 ? base + z : base - w / z, im: 0 }]
}

interface Shifts { x: number, y: number, w: number }
interface Start { m: number, p: number, q: number, r: number }

/** Where the double step may begin, and the first column of its transformation. */
function stepStart(a: SquareMatrix, l: number, last: number, { x, y, w }: Shifts): Start {
  for (let m = last - 2; ; m--) {
    const z = a[m]![m]!
    const rest = x - z
    const s = y - z
    let p = (rest * s - w) / a[m + 1]![m]! + a[m]![m + 1]!
    let q = a[m + 1]![m + 1]! - z - rest - s
    let r = a[m + 2]![m + 1]!
    const size = Math.abs(p) + Math.abs(q) + Math.abs(r)
    p /= size
    q /= size
    r /= size
    if (m === l) return { m, p, q, r }
    const u = Math.abs(a[m]![m - 1]!) * (Math.abs(q) + Math.abs(r))
    const v = Math.abs(p) * (Math.abs(a[m - 1]![m - 1]!) + Math.abs(z) + Math.abs(a[m + 1]![m + 1]!))
    if (u <= EPSILON * v) return { m, p, q, r }
  }
}

/** One reflection of rows and columns k, k + 1 and, unless at the end, k + 2. */
function reflect(a: SquareMatrix, k: number, l: number, last: number, v: { p: number, q: number, r: number, s: number }): void {
  const p = v.p + v.s
  const x = p / v.s
  const y = v.q / v.s
  const z = v.r / v.s
  const q = v.q / p
  const r = v.r / p
  const three = k !== last - 1
  const [one, two] = [a[k]!, a[k + 1]!]
  for (let j = k; j <= last; j++) {
    let sum = one[j]! + q * two[j]!
    if (three) {
      sum += r * a[k + 2]![j]!
      a[k + 2]![j]! -= sum * z
    }
    two[j]! -= sum * y
    one[j]! -= sum * x
  }
  for (let i = l; i <= Math.min(last, k + 3); i++) {
    const row = a[i]!
    let sum = x * row[k]! + y * row[k + 1]!
    if (three) {
      sum += z * row[k + 2]!
      row[k + 2]! -= sum * r
    }
    row[k + 1]! -= sum * q
    row[k]! -= sum
  }
}

function doubleStep(a: SquareMatrix, l: number, last: number, start: Start): void {
  let { p, q, r } = start
  const { m } = start
  for (let i = m + 2; i <= last; i++) {
    a[i]![i - 2] = 0
    if (i !== m + 2) a[i]![i - 3] = 0
  }
  for (let k = m; k < last; k++) {
    let x = 0
    if (k !== m) {
      p = a[k]![k - 1]!
      q = a[k + 1]![k - 1]!
      r = k === last - 1 ? 0 : a[k + 2]![k - 1]!
      x = Math.abs(p) + Math.abs(q) + Math.abs(r)
      if (x === 0) continue
      p /= x
      q /= x
      r /= x
    }
    const size = Math.sqrt(p * p + q * q + r * r)
    const s = p >= 0 ? size : -size
    if (s === 0) continue
    if (k !== m) a[k]![k - 1] = -s * x
    else if (l !== m) a[k]![k - 1] = -a[k]![k - 1]!
    reflect(a, k, l, last, { p, q, r, s })
  }
}

/** A shift out of the ordinary, where the usual ones go round in circles. */
function exceptional(a: SquareMatrix, last: number, x: number): Shifts {
  for (let i = 0; i <= last; i++) a[i]![i]! -= x
  const s = Math.abs(a[last]![last - 1]!) + Math.abs(a[last - 1]![last - 2]!)
  return { x: 0.75 * s, y: 0.75 * s, w: -0.4375 * s * s }
}

/**
 * All eigenvalues, in no order, complex ones in exact conjugate pairs.
 * @returns undefined where the iteration does not end or an element is not finite
 */
export function eigenvalues(a: SquareMatrix): Complex[] | undefined {
  if (a.some(row => row.some(x => !Number.isFinite(x)))) return undefined
  balance(a)
  toHessenberg(a)
  let norm = 0
  for (let i = 0; i < a.length; i++) for (let j = Math.max(i - 1, 0); j < a.length; j++) norm += Math.abs(a[i]![j]!)
  const found: Complex[] = []
  let last = a.length - 1
  let shift = 0
  for (let steps = 0; last >= 0;) {
    const l = blockStart(a, last, norm)
    const x = a[last]![last]!
    if (l === last) {
      found.push({ re: x + shift, im: 0 })
      last -= 1
      steps = 0
      continue
    }
    const y = a[last - 1]![last - 1]!
    const w = a[last]![last - 1]! * a[last - 1]![last]!
    if (l === last - 1) {
      found.push(...pairOf(y, x, w, shift))
      last -= 2
      steps = 0
      continue
    }
    if (steps === STEPS) return undefined
    const special = steps > 0 && steps % 10 === 0
    if (special) shift += x
    doubleStep(a, l, last, stepStart(a, l, last, special ? exceptional(a, last, x) : { x, y, w }))
    steps += 1
  }
  return found
}
