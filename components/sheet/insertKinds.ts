import type { BlockKind } from './extensions/blocks'

export interface InsertKind { kind: BlockKind, label: string, hint: string, /** further words it is found by */ words: string }

/** Kinds of block that can be put in, in the order in which a sheet is mostly written. */
export const INSERT_KINDS: readonly InsertKind[] = [
  { kind: 'calculation', label: 'Calculation', hint: 'lines of formulae with results', words: 'line formula given assumed hold input' },
  { kind: 'requirements', label: 'Requirements', hint: 'comparisons with their margins', words: 'limit verdict check margin' },
  { kind: 'response', label: 'Response', hint: 'magnitude, phase and step of a transfer function', words: 'plot graph gain transfer step' },
  { kind: 'paragraph', label: 'Text', hint: 'a paragraph', words: 'paragraph prose note conclusion' },
  { kind: 'heading1', label: 'Heading 1', hint: 'a part of the sheet', words: 'title section' },
  { kind: 'heading2', label: 'Heading 2', hint: 'within a part', words: 'title section' },
  { kind: 'heading3', label: 'Heading 3', hint: 'a small heading', words: 'title section' },
  { kind: 'bulletList', label: 'List', hint: 'points', words: 'bullet' },
  { kind: 'orderedList', label: 'Numbered list', hint: 'steps in order', words: 'ordered' },
  { kind: 'table', label: 'Table', hint: 'rows and columns of text', words: 'columns' },
  { kind: 'figure', label: 'Figure', hint: 'a picture from this device', words: 'image drawing photo' },
]

/** Kinds whose label or other words hold everything typed; those whose label begins with it come first. */
export function findKinds(query: string): InsertKind[] {
  const words = query.toLowerCase().split(/\s+/).filter(Boolean)
  const begins = (kind: InsertKind) => kind.label.toLowerCase().startsWith(query.trim().toLowerCase()) ? 0 : 1
  return INSERT_KINDS
    .filter(kind => words.every(word => `${kind.label} ${kind.words}`.toLowerCase().includes(word)))
    .sort((a, b) => begins(a) - begins(b))
}
