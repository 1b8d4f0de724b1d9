/**
 * Finite eigenvalues of the pencil G + sC, which may have any number of infinite ones: the constraints of the
 * equations are solved for as many unknowns as there are constraints, again and again until C has full rank
 * (the shuffle algorithm: D. G. Luenberger, "Time-invariant descriptor systems", Automatica 14 (1978)). What
 * is left of a difference of equal terms counts as zero, so that no infinite root comes back as a large one.
 */
import type { Complex } from '../numeric/complex'
import { reciprocal } from '../numeric/complex'
import { eigenvalues } from '../numeric/eigenvalues'
import type { SquareMatrix } from '../numeric/eigenvalues'
import { hypot } from '../numeric/math'

export interface Pencil { readonly g: Float64Array[], readonly c: Float64Array[] }

/** Part of the larger term below which a difference is rounding. */
const ROUNDING = 1e-12

/** row −= factor × other, from column `from` on. */
function subtractRow(row: Float64Array, other: Float64Array, factor: number, from = 0): void {
  if (factor === 0) return
  for (let j = from; j < row.length; j++) {
    const term = factor * other[j]!
    if (term === 0) continue
    const before = row[j]!
    const after = before - term
    row[j] = Math.abs(after) <= ROUNDING * Math.max(Math.abs(before), Math.abs(term)) ? 0 : after
  }
}

function swapRows(rows: Float64Array[], i: number, j: number): void {
  const row = rows[i]!
  rows[i] = rows[j]!
  rows[j] = row
}

function swapColumns(rows: readonly Float64Array[], i: number, j: number): void {
  if (i === j) return
  for (const row of rows) {
    const x = row[i]!
    row[i] = row[j]!
    row[j] = x
  }
}

interface Place { i: number, j: number, size: number }

function largest(rows: readonly Float64Array[], from: number, to: number, column: number): Place {
  const best = { i: -1, j: -1, size: 0 }
  for (let i = from; i < to; i++) {
    const row = rows[i]!
    for (let j = column; j < row.length; j++) {
      const size = Math.abs(row[j]!)
      if (size > best.size) Object.assign(best, { i, j, size })
    }
  }
  return best
}

/** Brings C to upper trapezoidal form by rows; its rank. */
function rankByRows({ g, c }: Pencil): number {
  for (let k = 0; k < c.length; k++) {
    const pivot = largest(c, k, c.length, k)
    if (pivot.size === 0) return k
    for (const m of [g, c]) {
      swapRows(m, k, pivot.i)
      swapColumns(m, k, pivot.j)
    }
    for (let i = k + 1; i < c.length; i++) {
      const factor = c[i]![k]! / c[k]![k]!
      subtractRow(c[i]!, c[k]!, factor, k)
      c[i]![k] = 0
      subtractRow(g[i]!, g[k]!, factor)
    }
  }
  return c.length
}

/** Puts the constraints, the rows of G from `rank` on, into the equations above; false where they depend on each other. */
function substituteConstraints({ g, c }: Pencil, rank: number): boolean {
  const n = g.length
  for (let k = n - 1; k >= rank; k--) {
    // Solved unknowns are swapped to the end; the pivot is sought among those before them.
    const best: Place = { i: -1, j: -1, size: 0 }
    for (let i = rank; i <= k; i++) for (let j = 0; j <= k; j++) if (Math.abs(g[i]![j]!) > best.size) Object.assign(best, { i, j, size: Math.abs(g[i]![j]!) })
    if (best.size === 0) return false
    swapRows(g, k, best.i)
    swapColumns(g, k, best.j)
    swapColumns(c, k, best.j)
    const row = g[k]!
    for (let i = 0; i < k; i++) {
      subtractRow(g[i]!, row, g[i]![k]! / row[k]!)
      g[i]![k] = 0
      if (i >= rank) continue
      subtractRow(c[i]!, row, c[i]![k]! / row[k]!)
      c[i]![k] = 0
    }
  }
  return true
}

/** The pencil without its infinite eigenvalues; undefined where det(G + sC) vanishes for every s. */
function deflated(pencil: Pencil): Pencil | undefined {
  let { g, c } = { g: pencil.g.map(row => row.slice()), c: pencil.c.map(row => row.slice()) }
  for (;;) {
    const rank = rankByRows({ g, c })
    if (rank === g.length) return { g, c }
    if (!substituteConstraints({ g, c }, rank)) return undefined
    g = g.slice(0, rank).map(row => row.slice(0, rank))
    c = c.slice(0, rank).map(row => row.slice(0, rank))
  }
}

/** −A⁻¹B by elimination with row pivots. */
function minusQuotient(a: readonly Float64Array[], b: readonly Float64Array[]): SquareMatrix {
  const n = a.length
  const left = a.map(row => row.slice())
  const right = b.map(row => row.map(x => -x))
  for (let k = 0; k < n; k++) {
    let p = k
    for (let i = k; i < n; i++) if (Math.abs(left[i]![k]!) > Math.abs(left[p]![k]!)) p = i
    swapRows(left, k, p)
    swapRows(right, k, p)
    for (let i = 0; i < n; i++) {
      if (i === k) continue
      const factor = left[i]![k]! / left[k]![k]!
      if (factor === 0) continue
      for (let j = k; j < n; j++) left[i]![j]! -= factor * left[k]![j]!
      for (let j = 0; j < n; j++) right[i]![j]! -= factor * right[k]![j]!
    }
  }
  return right.map((row, k) => row.map(x => x / left[k]![k]!))
}

const byModulus = (a: Complex, b: Complex) => hypot(a.re, a.im) - hypot(b.re, b.im) || a.re - b.re || b.im - a.im

/** Small roots come best from the reversed pencil: the rounding of QR is relative to the largest. */
function bestOfBoth(large: Complex[], small: Complex[]): Complex[] {
  large.sort(byModulus)
  small.sort(byModulus)
  if (small.length !== large.length) return large
  let split = 0
  let widest = 10
  for (let k = 1; k < large.length; k++) {
    const gap = hypot(large[k]!.re, large[k]!.im) / hypot(large[k - 1]!.re, large[k - 1]!.im)
    if (gap > widest) {
      widest = gap
      split = k
    }
  }
  return [...small.slice(0, split), ...large.slice(split)]
}

/**
 * Finite eigenvalues by rising modulus; those at zero are exact.
 * @returns undefined where the pencil is singular for every s
 */
export function finiteEigenvalues(pencil: Pencil): Complex[] | undefined {
  const finite = deflated(pencil)
  if (!finite) return undefined
  const regular = deflated({ g: finite.c, c: finite.g })
  if (!regular) return undefined
  const { g: c, c: g } = regular
  const zeros = new Array<Complex>(finite.g.length - g.length).fill({ re: 0, im: 0 })
  if (g.length === 0) return zeros
  const large = eigenvalues(minusQuotient(c, g))
  const small = eigenvalues(minusQuotient(g, c))
  if (!large) return undefined
  return [...zeros, ...bestOfBoth(large, (small ?? []).map(z => reciprocal(z)))]
}
