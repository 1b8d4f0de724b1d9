/** Which lines rest on which, followed to the end. */
import { isQuick } from './row'
import type { QuickRow, Row } from './row'

export class Influence {
  private readonly direct: number[][]
  private readonly whole = new Map<number, readonly QuickRow[] | null>()

  /** @param lineOf index of the line that defines a name, or −1 */
  constructor(private readonly rows: readonly Row[], lineOf: (name: string) => number) {
    this.direct = rows.map(() => [])
    rows.forEach((row, index) => {
      const uses = row.shape ? row.shape.uses.map(slot => row.names[slot] ?? '') : row.result?.uses ?? []
      for (const name of uses) this.direct[lineOf(name)]?.push(index)
    })
  }

  /** The line itself and all that rest on it, in reading order; null where one of them is compiled by itself. */
  of(index: number): readonly QuickRow[] | null {
    const known = this.whole.get(index)
    if (known !== undefined) return known
    const found = new Set([index])
    for (const one of found) for (const next of this.direct[one] ?? []) found.add(next)
    const rows = [...found].sort((a, b) => a - b).flatMap(one => this.rows[one] ?? [])
    const quick = rows.every(isQuick) ? rows : null
    this.whole.set(index, quick)
    return quick
  }
}
