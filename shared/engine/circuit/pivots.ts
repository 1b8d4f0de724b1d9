/**
 * The order of pivots of a sparse complex matrix: of the entries that are large enough in their row, the one that
 * makes least new ones (H. M. Markowitz, "The elimination form of the inverse", Management Science 3 (1957)).
 */
import { log2, powerOfTwo } from '../numeric/math'

export interface Coefficient { readonly row: number, readonly column: number, readonly re: number, readonly im: number }

interface Cell { re: number, im: number }

export interface PivotOrder {
  /** Rows and columns in the order of elimination. */
  readonly rows: readonly number[]
  readonly columns: readonly number[]
  /** Columns for which no pivot was left, where the matrix is singular. */
  readonly without: readonly number[]
}

/** A pivot is at least this part of the largest entry of its row. */
const THRESHOLD = 0.02
/** What is left of a difference below this part of its terms is nothing. */
const NOTHING = 1e-13
/** Rows looked at in each step. */
const CANDIDATES = 6

const sizeOf = (cell: Cell) => Math.abs(cell.re) + Math.abs(cell.im)

class Active {
  readonly rows: Map<number, Cell>[]
  readonly columns: Set<number>[]
  readonly left: Set<number>

  constructor(size: number, coefficients: readonly Coefficient[], private readonly late: ReadonlySet<number>) {
    this.rows = Array.from({ length: size }, () => new Map())
    this.columns = Array.from({ length: size }, () => new Set())
    this.left = new Set(this.rows.keys())
    for (const { row, column, re, im } of coefficients) {
      if (re === 0 && im === 0) continue
      this.rows[row]!.set(column, { re, im })
      this.columns[column]!.add(row)
    }
    this.equilibrate()
  }

  /** Rows, then columns, scaled to a largest entry near 1, so that "large enough" has a meaning. */
  private equilibrate(): void {
    for (const row of this.rows) {
      let largest = 0
      for (const cell of row.values()) largest = Math.max(largest, sizeOf(cell))
      if (largest > 0) for (const cell of row.values()) scale(cell, largest)
    }
    for (const [column, members] of this.columns.entries()) {
      let largest = 0
      for (const row of members) largest = Math.max(largest, sizeOf(this.rows[row]!.get(column)!))
      if (largest > 0) for (const row of members) scale(this.rows[row]!.get(column)!, largest)
    }
  }

  /** The next pivot; columns that are looked at come last, so that they need no substitution back. */
  choose(): { row: number, column: number } | undefined {
    let best: { row: number, column: number, cost: number, size: number } | undefined
    for (const row of this.candidates()) {
      const cells = this.rows[row]!
      let largest = 0
      for (const cell of cells.values()) largest = Math.max(largest, sizeOf(cell))
      for (const [column, cell] of cells) {
        const size = sizeOf(cell) / largest
        if (size < THRESHOLD) continue
        const cost = (cells.size - 1) * (this.columns[column]!.size - 1) + (this.late.has(column) ? 1e9 : 0)
        if (!best || cost < best.cost || (cost === best.cost && size > best.size)) best = { row, column, cost, size }
      }
    }
    return best
  }

  /** Rows with the fewest entries; all where those hold only columns that come last. */
  private candidates(): number[] {
    let fewest = Infinity
    for (const row of this.left) {
      const count = this.rows[row]!.size
      if (count > 0 && count < fewest) fewest = count
    }
    const near: number[] = []
    const all: number[] = []
    for (const row of this.left) {
      const cells = this.rows[row]!
      if (cells.size === 0) continue
      all.push(row)
      if (cells.size <= fewest && near.length < CANDIDATES && this.hasEarly(cells)) near.push(row)
    }
    return near.length > 0 ? near : all
  }

  private hasEarly(cells: ReadonlyMap<number, Cell>): boolean {
    if (this.late.size === 0) return true
    for (const column of cells.keys()) if (!this.late.has(column)) return true
    return false
  }

  eliminate(row: number, column: number): void {
    const pivotRow = this.rows[row]!
    const pivot = pivotRow.get(column)!
    const d = pivot.re * pivot.re + pivot.im * pivot.im
    this.left.delete(row)
    for (const other of pivotRow.keys()) this.columns[other]!.delete(row)
    for (const target of this.columns[column]!) {
      const cells = this.rows[target]!
      const a = cells.get(column)!
      const re = (a.re * pivot.re + a.im * pivot.im) / d
      const im = (a.im * pivot.re - a.re * pivot.im) / d
      cells.delete(column)
      for (const [other, u] of pivotRow) {
        if (other !== column) this.subtract(target, other, re * u.re - im * u.im, re * u.im + im * u.re)
      }
    }
    this.columns[column]!.clear()
  }

  private subtract(row: number, column: number, re: number, im: number): void {
    const cells = this.rows[row]!
    const cell = cells.get(column)
    if (!cell) {
      cells.set(column, { re: -re, im: -im })
      this.columns[column]!.add(row)
      return
    }
    const before = sizeOf(cell) + Math.abs(re) + Math.abs(im)
    cell.re -= re
    cell.im -= im
    if (sizeOf(cell) > NOTHING * before) return
    cells.delete(column)
    this.columns[column]!.delete(row)
  }
}

function scale(cell: Cell, largest: number): void {
  const factor = powerOfTwo(-Math.round(log2(largest)))
  cell.re *= factor
  cell.im *= factor
}

/**
 * @param size number of rows and columns
 * @param late columns that are eliminated last
 */
export function pivotOrder(size: number, coefficients: readonly Coefficient[], late: ReadonlySet<number>): PivotOrder {
  const active = new Active(size, coefficients, late)
  const rows: number[] = []
  const columns: number[] = []
  for (let step = 0; step < size; step++) {
    const pivot = active.choose()
    if (!pivot) break
    rows.push(pivot.row)
    columns.push(pivot.column)
    active.eliminate(pivot.row, pivot.column)
  }
  const used = new Set(columns)
  return { rows, columns, without: [...active.columns.keys()].filter(c => !used.has(c)) }
}
