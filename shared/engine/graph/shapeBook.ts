/** Finds the shape of a line by its outline and the kinds of what its words mean. */
import type { ScalarKind } from '../quantity/kind'
import { isUnit } from '../quantity/unitTable'
import type { Outline } from './outline'
import type { Row } from './row'
import { compileShape } from './shape'
import type { Shape } from './shape'

export interface FoundShape {
  readonly shape: Shape
  /** Row and name of each slot. */
  readonly suppliers: readonly Row[]
  readonly names: readonly string[]
}

/** What was compiled for one pattern, words of certain kinds. */
interface Known {
  /** Of each word: the kind of the value it names, or undefined where it names none. */
  readonly kinds: readonly (ScalarKind | undefined)[]
  /** Of each word: its text, where that matters. A word that is a unit may be read as one also where it is a name. */
  readonly texts: readonly (string | undefined)[]
  /** Null where such a line has to be compiled by itself. */
  readonly shape: Shape | null
}

/** Kept at most; a sheet has a few dozen. */
const MOST = 5000
/** For one pattern. */
const MOST_ALIKE = 40

const NOTHING: readonly never[] = []

export class ShapeBook {
  private readonly book = new Map<string, Known[]>()
  private size = 0

  /** Undefined where the line has to be compiled by itself. `rowOf` tells what a word means above the line. */
  find(source: string, { pattern, words }: Outline, rowOf: (word: string) => Row | undefined): FoundShape | undefined {
    const rows: (Row | undefined)[] = []
    for (const word of words) {
      const row = rowOf(word)
      if (row && !row.kind) return undefined
      rows.push(row)
    }
    const shape = (this.lookup(pattern, words, rows) ?? this.add(pattern, source, words, rows)).shape
    if (!shape) return undefined
    if (!rows.includes(undefined)) return { shape, suppliers: rows as Row[], names: words }
    if (rows.every(row => row === undefined)) return { shape, suppliers: NOTHING, names: NOTHING }
    return { shape, suppliers: rows.filter(row => row !== undefined), names: words.filter((_, i) => rows[i]) }
  }

  private lookup(pattern: string, words: readonly string[], rows: readonly (Row | undefined)[]): Known | undefined {
    for (const known of this.book.get(pattern) ?? NOTHING) {
      if (agrees(known, words, rows)) return known
    }
    return undefined
  }

  private add(pattern: string, source: string, words: readonly string[], rows: readonly (Row | undefined)[]): Known {
    const kinds = rows.map(row => row?.kind)
    const slots = words.flatMap((word, i): [string, ScalarKind][] => kinds[i] ? [[word, kinds[i]]] : [])
    const known: Known = { kinds, texts: words.map((word, i) => kinds[i] && !isUnit(word) ? undefined : word), shape: compileShape(source, new Map(slots)) ?? null }
    if (this.size >= MOST) {
      this.book.clear()
      this.size = 0
    }
    this.size += 1
    const alike = this.book.get(pattern) ?? []
    this.book.set(pattern, [known, ...alike].slice(0, MOST_ALIKE))
    return known
  }
}

function agrees({ kinds, texts }: Known, words: readonly string[], rows: readonly (Row | undefined)[]): boolean {
  for (let i = 0; i < rows.length; i += 1) {
    if (rows[i]?.kind !== kinds[i]) return false
    if (texts[i] !== undefined && texts[i] !== words[i]) return false
  }
  return true
}
