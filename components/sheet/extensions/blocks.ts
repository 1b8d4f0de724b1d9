/** Blocks as a whole: inserting one of a kind, moving, duplicating, deleting. */
import { Extension } from '@tiptap/core'
import { TextSelection, type EditorState, type Transaction } from '@tiptap/pm/state'
import type { Node as DocumentNode, Schema } from '@tiptap/pm/model'
import { newNodeId } from './identity'
import { blockPlace, caretIntoBlock, caretIntoLine, isLinesBlock, linePlace, makeLine } from './place'

export type BlockKind = 'calculation' | 'requirements' | 'response' | 'paragraph' | 'heading1' | 'heading2' | 'heading3' | 'bulletList' | 'orderedList' | 'table' | 'figure'

declare module '@tiptap/core' {
  interface Commands<ReturnType> {
    blocks: {
      /** Puts a new block below the one at the caret; an empty paragraph there gives way to it. */
      insertBlock: (kind: BlockKind, attributes?: Record<string, unknown>) => ReturnType
      /** Moves the line or block at the caret past its neighbour. */
      moveRow: (by: 1 | -1) => ReturnType
      duplicateRow: () => ReturnType
      removeRow: () => ReturnType
    }
  }
}

/** Makes an empty block of a kind. */
export function makeBlock(schema: Schema, kind: BlockKind, attributes: Record<string, unknown> = {}): DocumentNode {
  const make = (name: string, attrs: Record<string, unknown> = {}, content?: DocumentNode | DocumentNode[]) => {
    const type = schema.nodes[name]
    if (!type) throw new Error(`The schema has no ${name}.`)
    return type.create(attrs, content)
  }
  const own = { ...attributes, id: newNodeId() }
  switch (kind) {
    case 'calculation':
    case 'requirements': return make(kind, own, [makeLine(schema)])
    case 'heading1': return make('heading', { ...own, level: 1 })
    case 'heading2': return make('heading', { ...own, level: 2 })
    case 'heading3': return make('heading', { ...own, level: 3 })
    case 'bulletList':
    case 'orderedList': return make(kind, own, make('listItem', {}, make('paragraph')))
    case 'table': {
      const row = (cell: string) => make('tableRow', {}, Array.from({ length: 3 }, () => make(cell, {}, make('paragraph'))))
      return make('table', own, [row('tableHeader'), row('tableCell'), row('tableCell')])
    }
    default: return make(kind, own)
  }
}

function insert(tr: Transaction, state: EditorState, kind: BlockKind, attributes?: Record<string, unknown>): void {
  const place = blockPlace(state)
  const block = makeBlock(state.schema, kind, attributes)
  const replaces = place && place.node.type.name === 'paragraph' && place.node.content.size === 0
  const pos = place ? (replaces ? place.pos : place.pos + place.node.nodeSize) : state.doc.content.size
  if (replaces) tr.replaceWith(place.pos, place.pos + place.node.nodeSize, block)
  else tr.insert(pos, block)
  caretIntoBlock(tr, pos, 'start').scrollIntoView()
}

/** What is moved, copied or deleted from where the caret is: the line, else the block. */
function rowPlace(state: EditorState): { pos: number, node: DocumentNode, parentStart: number, parent: DocumentNode } | null {
  const line = linePlace(state)
  if (line && line.block.childCount > 1) return { pos: line.linePos, node: line.line, parentStart: line.blockPos + 1, parent: line.block }
  const block = blockPlace(state)
  return block ? { ...block, parentStart: 0, parent: state.doc } : null
}

function move(tr: Transaction, state: EditorState, by: 1 | -1): boolean {
  const row = rowPlace(state)
  if (!row) return false
  const edge = state.doc.resolve(by === 1 ? row.pos + row.node.nodeSize : row.pos)
  const neighbour = by === 1 ? edge.nodeAfter : edge.nodeBefore
  if (!neighbour) return false
  const within = state.selection.from - row.pos
  const to = by === 1 ? row.pos + neighbour.nodeSize : row.pos - neighbour.nodeSize
  tr.delete(row.pos, row.pos + row.node.nodeSize).insert(to, row.node)
  restoreCaret(tr, to, row.node, within)
  return true
}

function restoreCaret(tr: Transaction, pos: number, node: DocumentNode, within: number): void {
  const $at = tr.doc.resolve(Math.min(pos + within, pos + node.nodeSize - 1))
  if (node.type.name === 'line') caretIntoLine(tr, pos, $at.parent.type.name === 'reference' ? 'reference' : 'source', $at.parentOffset)
  else if (node.isAtom || !$at.parent.inlineContent) caretIntoBlock(tr, pos, 'start')
  else tr.setSelection(TextSelection.create(tr.doc, $at.pos))
  tr.scrollIntoView()
}

function remove(tr: Transaction, state: EditorState): boolean {
  const row = rowPlace(state)
  if (!row) return false
  tr.delete(row.pos, row.pos + row.node.nodeSize)
  const edge = tr.doc.resolve(Math.min(row.pos, tr.doc.content.size))
  if (row.node.type.name === 'line') {
    const pos = edge.nodeAfter ? edge.pos : edge.pos - (edge.nodeBefore?.nodeSize ?? 0)
    caretIntoLine(tr, pos, 'source')
  }
  else if (edge.nodeAfter) caretIntoBlock(tr, edge.pos, 'start')
  else if (edge.nodeBefore) caretIntoBlock(tr, edge.pos - edge.nodeBefore.nodeSize, 'end')
  tr.scrollIntoView()
  return true
}

function duplicate(tr: Transaction, state: EditorState): boolean {
  const row = rowPlace(state)
  if (!row) return false
  const at = row.pos + row.node.nodeSize
  tr.insert(at, row.node)
  if (isLinesBlock(row.parent)) caretIntoLine(tr, at, 'source')
  else caretIntoBlock(tr, at, 'start')
  tr.scrollIntoView()
  return true
}

export const Blocks = Extension.create<{ openInsert: () => void }>({
  name: 'blocks',
  priority: 1050,
  addOptions: () => ({ openInsert: () => {} }),
  addCommands() {
    return {
      insertBlock: (kind, attributes) => ({ tr, state, dispatch }) => {
        if (dispatch) insert(tr, state, kind, attributes)
        return true
      },
      moveRow: by => ({ tr, state, dispatch }) => dispatch ? move(tr, state, by) : true,
      duplicateRow: () => ({ tr, state, dispatch }) => dispatch ? duplicate(tr, state) : true,
      removeRow: () => ({ tr, state, dispatch }) => dispatch ? remove(tr, state) : true,
    }
  },
  addKeyboardShortcuts() {
    return {
      'Mod-Enter': () => { this.options.openInsert(); return true },
      'Alt-ArrowUp': () => this.editor.commands.moveRow(-1),
      'Alt-ArrowDown': () => this.editor.commands.moveRow(1),
      'Alt-Shift-d': () => this.editor.commands.duplicateRow(),
      'Alt-Shift-x': () => this.editor.commands.removeRow(),
    }
  },
})
