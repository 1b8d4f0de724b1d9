/**
 * The elimination of a sparse matrix written out as indices, so that it can be replayed for each frequency without
 * looking anything up: every entry that ever exists has a slot, and a step names the slots it takes and changes.
 */
import type { PivotOrder } from './pivots'

export interface Program {
  readonly slots: number
  /** Slot of each entry of the matrix, in the order they were given. */
  readonly entrySlots: Int32Array
  /** Slot of each entry of the right-hand side, in the order they were given. */
  readonly sourceSlots: Int32Array
  /** For each pivot: its slot, its number of targets below and of entries to the right (right-hand side included). */
  readonly pivots: Int32Array
  /** For each pivot in turn: slots to the right; then for each row below: its slot in the column, and the slots changed. */
  readonly steps: Int32Array
  /** Substitution back, for the unknowns that are wanted and what they need: pivot, right-hand slot, count, (slot, pivot)… */
  readonly back: Int32Array
  /** Pivot at which each unknown was found. */
  readonly pivotOf: Int32Array
}

type Row = Map<number, number>

interface Place { readonly row: number, readonly column: number }

class Layout {
  readonly rows: Row[]
  readonly columns: Set<number>[]
  slots = 0

  constructor(readonly size: number) {
    this.rows = Array.from({ length: size }, () => new Map())
    this.columns = Array.from({ length: size + 1 }, () => new Set())
  }

  slot(row: number, column: number): number {
    const known = this.rows[row]!.get(column)
    if (known !== undefined) return known
    this.rows[row]!.set(column, this.slots)
    this.columns[column]!.add(row)
    return this.slots++
  }
}

/**
 * @param entries places of the matrix
 * @param sources rows of the right-hand side that are not zero
 * @param wanted unknowns whose values are asked for
 */
export function programOf(order: PivotOrder, size: number, entries: readonly Place[], sources: readonly number[], wanted: readonly number[]): Program {
  const layout = new Layout(size)
  const entrySlots = Int32Array.from(entries, e => layout.slot(e.row, e.column))
  const sourceSlots = Int32Array.from(sources, row => layout.slot(row, size))
  const pivots: number[] = []
  const steps: number[] = []
  const done = new Set<number>()
  const later: [number, number][][] = []
  for (const [k, row] of order.rows.entries()) {
    const column = order.columns[k]!
    done.add(column)
    const right = [...layout.rows[row]!].filter(([c]) => !done.has(c))
    const below = [...layout.columns[column]!].filter(r => r !== row)
    pivots.push(layout.slot(row, column), below.length, right.length)
    steps.push(...right.map(([, slot]) => slot))
    for (const [c] of right) layout.columns[c]!.delete(row)
    for (const target of below) {
      steps.push(layout.slot(target, column))
      for (const [c] of right) steps.push(layout.slot(target, c))
    }
    later.push(right)
  }
  const pivotOf = new Int32Array(size)
  for (const [k, column] of order.columns.entries()) pivotOf[column] = k
  return { slots: layout.slots, entrySlots, sourceSlots, pivots: Int32Array.from(pivots), steps: Int32Array.from(steps), back: substitution(later, pivotOf, size, wanted), pivotOf }
}

/** Only what the wanted unknowns need; a right-hand slot of −1 is a zero. */
function substitution(later: readonly [number, number][][], pivotOf: Int32Array, size: number, wanted: readonly number[]): Int32Array {
  const needed = new Uint8Array(later.length)
  for (const unknown of wanted) needed[pivotOf[unknown]!] = 1
  for (let k = 0; k < later.length; k++) {
    if (needed[k]) for (const [column] of later[k]!) if (column !== size) needed[pivotOf[column]!] = 1
  }
  const back: number[] = []
  for (let k = later.length - 1; k >= 0; k--) {
    if (!needed[k]) continue
    const right = later[k]!.filter(([column]) => column !== size)
    back.push(k, later[k]!.find(([column]) => column === size)?.[1] ?? -1, right.length)
    for (const [column, slot] of right) back.push(slot, pivotOf[column]!)
  }
  return Int32Array.from(back)
}

/** Numbers of one run: real and imaginary parts side by side. */
export interface Workspace {
  readonly data: Float64Array
  /** Reciprocals of the pivots. */
  readonly inverse: Float64Array
  /** Unknowns by pivot. */
  readonly solution: Float64Array
}

export function workspaceOf(program: Program): Workspace {
  const pivots = program.pivots.length / 3
  return { data: new Float64Array(2 * program.slots), inverse: new Float64Array(2 * pivots), solution: new Float64Array(2 * pivots) }
}

/** Eliminates what stands in `data`. */
export function eliminate(program: Program, { data, inverse }: Workspace): void {
  const { pivots, steps } = program
  let at = 0
  for (let k = 0; k < pivots.length; k += 3) {
    const slot = 2 * pivots[k]!
    const pr = data[slot]!
    const pi = data[slot + 1]!
    const d = 1 / (pr * pr + pi * pi)
    const ir = pr * d
    const ii = -pi * d
    const place = 2 * (k / 3)
    inverse[place] = ir
    inverse[place + 1] = ii
    const right = at
    const count = pivots[k + 2]!
    at += count
    for (let below = pivots[k + 1]!; below > 0; below--) {
      const from = 2 * steps[at++]!
      const ar = data[from]!
      const ai = data[from + 1]!
      const lr = ar * ir - ai * ii
      const li = ar * ii + ai * ir
      for (let j = 0; j < count; j++) {
        const u = 2 * steps[right + j]!
        const t = 2 * steps[at++]!
        const ur = data[u]!
        const ui = data[u + 1]!
        data[t]! -= lr * ur - li * ui
        data[t + 1]! -= lr * ui + li * ur
      }
    }
  }
}

/** Fills in the wanted unknowns and those they need. */
export function substitute(program: Program, { data, inverse, solution }: Workspace): void {
  const { back } = program
  for (let at = 0; at < back.length;) {
    const k = 2 * back[at]!
    const source = 2 * back[at + 1]!
    let count = back[at + 2]!
    at += 3
    let re = source < 0 ? 0 : data[source]!
    let im = source < 0 ? 0 : data[source + 1]!
    for (; count > 0; count--) {
      const u = 2 * back[at]!
      const x = 2 * back[at + 1]!
      re -= data[u]! * solution[x]! - data[u + 1]! * solution[x + 1]!
      im -= data[u]! * solution[x + 1]! + data[u + 1]! * solution[x]!
      at += 2
    }
    solution[k] = re * inverse[k]! - im * inverse[k + 1]!
    solution[k + 1] = re * inverse[k + 1]! + im * inverse[k]!
  }
}
