/** Where the caret is, in the words of a sheet: which block, which line, which part of the line. */
import type { EditorState, Transaction } from '@tiptap/pm/state'
import { NodeSelection, TextSelection } from '@tiptap/pm/state'
import type { Node as DocumentNode, Schema } from '@tiptap/pm/model'
import { newNodeId } from './identity'

export type LinePart = 'source' | 'reference'

export interface LinePlace {
  block: DocumentNode
  blockPos: number
  line: DocumentNode
  linePos: number
  /** Index of the line in its block. */
  index: number
  part: LinePart
  /** Start of the part's text. */
  start: number
  text: string
  /** Offset of the caret in the text. */
  offset: number
}

export const isLinesBlock = (node: DocumentNode | null | undefined) => node?.type.name === 'calculation' || node?.type.name === 'requirements'

/** The line at the caret; null in prose, and where a selection reaches beyond one part of one line. */
export function linePlace(state: EditorState): LinePlace | null {
  const { $from, $to } = state.selection
  const part = $from.parent.type.name
  if ((part !== 'source' && part !== 'reference') || !$from.sameParent($to) || $from.depth !== 3) return null
  return {
    block: $from.node(1),
    blockPos: $from.before(1),
    line: $from.node(2),
    linePos: $from.before(2),
    index: $from.index(1),
    part,
    start: $from.start(3),
    text: $from.parent.textContent,
    offset: $from.parentOffset,
  }
}

/** The top-level block at the caret: its position, or null in an empty sheet. */
export function blockPlace(state: EditorState): { pos: number, node: DocumentNode } | null {
  const { $from } = state.selection
  const pos = $from.depth === 0 ? $from.pos : $from.before(1)
  const node = state.doc.nodeAt(pos)
  return node ? { pos, node } : null
}

/** Id of the row (line or block) that holds the caret. */
export function rowIdAt(state: EditorState): string | null {
  const { $from } = state.selection
  const node = $from.depth >= 2 && isLinesBlock($from.node(1)) ? $from.node(2) : blockPlace(state)?.node
  return typeof node?.attrs.id === 'string' && node.attrs.id !== '' ? node.attrs.id : null
}

/** Position of the line or top-level block with this id, or null. */
export function positionOfRow(doc: DocumentNode, id: string): number | null {
  let found: number | null = null
  doc.forEach((block, pos) => {
    if (found !== null) return
    if (block.attrs.id === id) found = pos
    else if (isLinesBlock(block)) block.forEach((line, offset) => { if (line.attrs.id === id) found = pos + 1 + offset })
  })
  return found
}

/** A line as it is made here: both parts, so that either can be typed in at once. */
export function makeLine(schema: Schema, source = '', reference = '', status: string | null = null): DocumentNode {
  const { line, source: sourceType, reference: referenceType } = schema.nodes
  if (!line || !sourceType || !referenceType) throw new Error('The schema has no lines.')
  const textOf = (content: string) => content ? [schema.text(content)] : []
  return line.create({ id: newNodeId(), status }, [sourceType.create(null, textOf(source)), referenceType.create(null, textOf(reference))])
}

/** Puts the caret into a part of the line at `linePos`, making the part if it is missing. */
export function caretIntoLine(tr: Transaction, linePos: number, part: LinePart, where: number | 'start' | 'end' = 'end'): Transaction {
  const line = tr.doc.nodeAt(linePos)
  if (!line) return tr
  let at: number | null = null
  line.forEach((child, offset) => { if (at === null && child.type.name === part) at = linePos + 1 + offset })
  if (at === null) {
    const made = tr.doc.type.schema.nodes[part]?.create()
    if (!made) return tr
    at = part === 'source' ? linePos + 1 : linePos + line.nodeSize - 1
    tr.insert(at, made)
  }
  const size = tr.doc.nodeAt(at)?.content.size ?? 0
  const offset = where === 'start' ? 0 : where === 'end' ? size : Math.min(where, size)
  return tr.setSelection(TextSelection.create(tr.doc, at + 1 + offset))
}

/** Puts the caret into the block at `pos`: the first or last line's formula, the text, or the block as a whole. */
export function caretIntoBlock(tr: Transaction, pos: number, where: 'start' | 'end'): Transaction {
  const block = tr.doc.nodeAt(pos)
  if (!block) return tr
  if (isLinesBlock(block)) {
    if (block.childCount === 0) tr.insert(pos + 1, makeLine(tr.doc.type.schema))
    const now = tr.doc.nodeAt(pos)
    const last = now?.lastChild
    if (!now || !last) return tr
    return caretIntoLine(tr, where === 'start' ? pos + 1 : pos + now.nodeSize - 1 - last.nodeSize, 'source', where)
  }
  if (block.isAtom) return tr.setSelection(NodeSelection.create(tr.doc, pos))
  const edge = where === 'start' ? tr.doc.resolve(pos + 1) : tr.doc.resolve(pos + block.nodeSize - 1)
  return tr.setSelection(TextSelection.near(edge, where === 'start' ? 1 : -1))
}
