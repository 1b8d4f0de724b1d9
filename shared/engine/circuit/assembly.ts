/**
 * Modified nodal equations under construction (C.-W. Ho, A. E. Ruehli and P. A. Brennan, "The modified nodal
 * approach to network analysis", IEEE Transactions on Circuits and Systems 22 (1975)): one unknown voltage for
 * each node but the reference, and one unknown current for each element that has no admittance.
 */

/** A coefficient g + s·c + l/s of the equations. */
export interface Entry { readonly row: number, readonly column: number, g: number, c: number, l: number }

/** What an unknown stands for, and whose equation stands in the row of the same index. */
export interface Unknown { readonly kind: 'voltage' | 'current', /** node, or reference designator */ readonly name: string }

/** Row or column of the reference node: it has none. */
export const GROUND = -1

export class Assembly {
  readonly unknowns: Unknown[] = []
  readonly entries: Entry[] = []
  private readonly found = new Map<string, Entry>()
  private readonly nodeIndex = new Map<string, number>()
  private readonly branchIndex = new Map<string, number>()

  /** Index of a node's voltage. */
  node(name: string): number {
    if (name === '0') return GROUND
    return this.indexOf(this.nodeIndex, 'voltage', name)
  }

  /** Index of an element's current, from its first node to its second. */
  branch(ref: string): number {
    return this.indexOf(this.branchIndex, 'current', ref)
  }

  knownNode(name: string): number | undefined {
    return name === '0' ? GROUND : this.nodeIndex.get(name)
  }

  knownBranch(ref: string): number | undefined {
    return this.branchIndex.get(ref)
  }

  private indexOf(index: Map<string, number>, kind: Unknown['kind'], name: string): number {
    const known = index.get(name)
    if (known !== undefined) return known
    index.set(name, this.unknowns.length)
    this.unknowns.push({ kind, name })
    return this.unknowns.length - 1
  }

  add(row: number, column: number, g: number, c = 0, l = 0): void {
    if (row === GROUND || column === GROUND) return
    const key = `${row},${column}`
    const entry = this.found.get(key)
    if (entry) {
      entry.g += g
      entry.c += c
      entry.l += l
      return
    }
    const made = { row, column, g, c, l }
    this.found.set(key, made)
    this.entries.push(made)
  }

  /** An admittance g + s·c + l/s from node p to node n. */
  admittance(p: number, n: number, g: number, c = 0, l = 0): void {
    this.add(p, p, g, c, l)
    this.add(n, n, g, c, l)
    this.add(p, n, -g, -c, -l)
    this.add(n, p, -g, -c, -l)
  }

  /** Lets the unknown current at `branch` leave node p and enter node n. */
  flow(branch: number, p: number, n: number, times = 1): void {
    this.add(p, branch, times)
    this.add(n, branch, -times)
  }

  /** Puts times × (voltage between p and n) into the equation `row`. */
  across(row: number, p: number, n: number, times = 1): void {
    this.add(row, p, times)
    this.add(row, n, -times)
  }
}
