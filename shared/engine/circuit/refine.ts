/**
 * Sharpens an eigenvalue of G + sC in the equations it came from, where every element still stands by itself:
 * Rayleigh quotients of the vectors on both sides (A. M. Ostrowski, "On the convergence of the Rayleigh quotient
 * iteration", Archive for Rational Mechanics and Analysis 3 (1959)). The error is then relative to the modulus
 * of this eigenvalue rather than to that of the largest.
 */
import type { Complex } from '../numeric/complex'
import { EPSILON, hypot } from '../numeric/math'
import type { Pencil } from './pencil'

const STEPS = 4
/** A step further than this part of the modulus leads to another eigenvalue. */
const FAR = 1e-2

/** A complex square matrix, rows after one another, factored in place. */
interface Factored { readonly n: number, readonly re: Float64Array, readonly im: Float64Array, readonly order: Int32Array }

function matrixAt({ g, c }: Pencil, s: Complex): Factored {
  const n = g.length
  const re = new Float64Array(n * n)
  const im = new Float64Array(n * n)
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      re[i * n + j] = g[i]![j]! + s.re * c[i]![j]!
      im[i * n + j] = s.im * c[i]![j]!
    }
  }
  return { n, re, im, order: Int32Array.from({ length: n }, (_, k) => k) }
}

function swap({ n, re, im, order }: Factored, i: number, j: number): void {
  if (i === j) return
  for (let k = 0; k < n; k++) {
    const [x, y] = [re[i * n + k]!, im[i * n + k]!]
    re[i * n + k] = re[j * n + k]!
    im[i * n + k] = im[j * n + k]!
    re[j * n + k] = x
    im[j * n + k] = y
  }
  const o = order[i]!
  order[i] = order[j]!
  order[j] = o
}

/** L below and U on and above the diagonal, with row pivots; a pivot of nothing is put up with. */
function factor(m: Factored): void {
  const { n, re, im } = m
  for (let k = 0; k < n; k++) {
    let p = k
    let best = -1
    for (let i = k; i < n; i++) {
      const size = Math.abs(re[i * n + k]!) + Math.abs(im[i * n + k]!)
      if (size <= best) continue
      best = size
      p = i
    }
    swap(m, k, p)
    if (best < EPSILON * EPSILON) re[k * n + k] = EPSILON * EPSILON
    const pr = re[k * n + k]!
    const pi = im[k * n + k]!
    const d = pr * pr + pi * pi
    for (let i = k + 1; i < n; i++) {
      const at = i * n + k
      if (re[at] === 0 && im[at] === 0) continue
      const lr = (re[at]! * pr + im[at]! * pi) / d
      const li = (im[at]! * pr - re[at]! * pi) / d
      re[at] = lr
      im[at] = li
      for (let j = k + 1; j < n; j++) {
        const ur = re[k * n + j]!
        const ui = im[k * n + j]!
        re[i * n + j]! -= lr * ur - li * ui
        im[i * n + j]! -= lr * ui + li * ur
      }
    }
  }
}

interface Vector { readonly re: Float64Array, readonly im: Float64Array }

const vector = (n: number): Vector => ({ re: new Float64Array(n), im: new Float64Array(n) })

/** x[i] −= m·x[j] */
function take(x: Vector, i: number, j: number, mr: number, mi: number): void {
  x.re[i]! -= mr * x.re[j]! - mi * x.im[j]!
  x.im[i]! -= mr * x.im[j]! + mi * x.re[j]!
}

function divideBy(x: Vector, i: number, pr: number, pi: number): void {
  const d = pr * pr + pi * pi
  const [xr, xi] = [x.re[i]!, x.im[i]!]
  x.re[i] = (xr * pr + xi * pi) / d
  x.im[i] = (xi * pr - xr * pi) / d
}

/** U x = b in place: one step of inverse iteration needs no more. */
function solveUpper({ n, re, im }: Factored, x: Vector): void {
  for (let i = n - 1; i >= 0; i--) {
    for (let j = i + 1; j < n; j++) take(x, i, j, re[i * n + j]!, im[i * n + j]!)
    divideBy(x, i, re[i * n + i]!, im[i * n + i]!)
  }
}

function solve(m: Factored, b: Vector): Vector {
  const { n, re, im, order } = m
  const x: Vector = { re: Float64Array.from(order, k => b.re[k]!), im: Float64Array.from(order, k => b.im[k]!) }
  for (let i = 0; i < n; i++) for (let j = 0; j < i; j++) take(x, i, j, re[i * n + j]!, im[i * n + j]!)
  solveUpper(m, x)
  return x
}

/** Aᵀ y = b. */
function solveTransposed(m: Factored, b: Vector): Vector {
  const { n, re, im, order } = m
  const x: Vector = { re: b.re.slice(), im: b.im.slice() }
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < i; j++) take(x, i, j, re[j * n + i]!, im[j * n + i]!)
    divideBy(x, i, re[i * n + i]!, im[i * n + i]!)
  }
  for (let i = n - 1; i >= 0; i--) for (let j = i + 1; j < n; j++) take(x, i, j, re[j * n + i]!, im[j * n + i]!)
  const y = vector(n)
  order.forEach((row, k) => {
    y.re[row] = x.re[k]!
    y.im[row] = x.im[k]!
  })
  return y
}

function normalised(x: Vector): Vector {
  let size = 0
  for (let i = 0; i < x.re.length; i++) size = Math.max(size, Math.abs(x.re[i]!), Math.abs(x.im[i]!))
  return { re: x.re.map(v => v / size), im: x.im.map(v => v / size) }
}

/** C x or Cᵀ x. */
function times(c: readonly Float64Array[], x: Vector, transposed: boolean): Vector {
  const y = vector(c.length)
  for (let i = 0; i < c.length; i++) {
    for (let j = 0; j < c.length; j++) {
      const k = c[i]![j]!
      if (k === 0) continue
      const [to, from] = transposed ? [j, i] : [i, j]
      y.re[to]! += k * x.re[from]!
      y.im[to]! += k * x.im[from]!
    }
  }
  return y
}

/** yᵀ(G + sC)x and yᵀCx. */
function quotient({ g, c }: Pencil, s: Complex, x: Vector, y: Vector): Complex {
  const [gx, cx] = [times(g, x, false), times(c, x, false)]
  const sum = { ar: 0, ai: 0, cr: 0, ci: 0 }
  for (let i = 0; i < g.length; i++) {
    const ar = gx.re[i]! + s.re * cx.re[i]! - s.im * cx.im[i]!
    const ai = gx.im[i]! + s.re * cx.im[i]! + s.im * cx.re[i]!
    sum.ar += y.re[i]! * ar - y.im[i]! * ai
    sum.ai += y.re[i]! * ai + y.im[i]! * ar
    sum.cr += y.re[i]! * cx.re[i]! - y.im[i]! * cx.im[i]!
    sum.ci += y.re[i]! * cx.im[i]! + y.im[i]! * cx.re[i]!
  }
  const d = sum.cr * sum.cr + sum.ci * sum.ci
  return { re: (sum.ar * sum.cr + sum.ai * sum.ci) / d, im: (sum.ai * sum.cr - sum.ar * sum.ci) / d }
}

/** Vectors on both sides at s, by two steps of inverse iteration. */
function sides(pencil: Pencil, s: Complex): [Vector, Vector] {
  const m = matrixAt(pencil, s)
  factor(m)
  const start: Vector = { re: Float64Array.from({ length: m.n }, (_, i) => 1 + (i % 7) / 9), im: Float64Array.from({ length: m.n }, (_, i) => (i % 5) / 11) }
  const x = normalised(solve(m, start))
  const y = normalised(solveTransposed(m, start))
  return [normalised(solve(m, times(pencil.c, x, false))), normalised(solveTransposed(m, times(pencil.c, y, true)))]
}

/** The eigenvalue near `start`; `start` itself where the way leads elsewhere, as it does at multiple ones. */
export function refined(pencil: Pencil, start: Complex): Complex {
  const size = hypot(start.re, start.im)
  if (size === 0) return start
  let s = start
  let before = Infinity
  for (let step = 0; step < STEPS; step++) {
    const [x, y] = sides(pencil, s)
    const by = quotient(pencil, s, x, y)
    const length = hypot(by.re, by.im)
    if (!(length < before)) break
    before = length
    s = { re: s.re - by.re, im: start.im === 0 ? 0 : s.im - by.im }
    if (length <= 2 * EPSILON * size) break
  }
  return hypot(s.re - start.re, s.im - start.im) <= FAR * size ? s : start
}
