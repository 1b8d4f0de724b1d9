/** The keyboard in lines: Enter, Tab, arrows, Backspace and Delete do what they do on a ruled pad. */
import { Extension } from '@tiptap/core'
import type { Command, EditorState, Transaction } from '@tiptap/pm/state'
import { TextSelection } from '@tiptap/pm/state'
import type { EditorView } from '@tiptap/pm/view'
import { lineText } from './lines'
import { caretIntoBlock, caretIntoLine, isLinesBlock, linePlace, makeLine, type LinePlace } from './place'

declare module '@tiptap/core' {
  interface Commands<ReturnType> {
    lineKeys: {
      /** Puts the caret into the Reference of the line at `linePos`, or of the line at the caret. */
      enterReference: (linePos?: number) => ReturnType
    }
  }
}

type Dispatch = ((tr: Transaction) => void) | undefined

const blockEnd = (place: LinePlace) => place.blockPos + place.block.nodeSize

/** Position of the line `by` lines from this one in its block, or null. */
function siblingLine(place: LinePlace, by: 1 | -1): number | null {
  const index = place.index + by
  if (index < 0 || index >= place.block.childCount) return null
  return by === 1 ? place.linePos + place.line.nodeSize : place.linePos - place.block.child(index).nodeSize
}

/** Takes an empty line away; an empty block becomes a paragraph. */
function leaveBlock(state: EditorState, place: LinePlace): Transaction {
  const paragraph = state.schema.nodes.paragraph?.create()
  const tr = state.tr
  if (!paragraph) return tr
  if (place.block.childCount === 1) tr.replaceWith(place.blockPos, blockEnd(place), paragraph)
  else tr.insert(blockEnd(place), paragraph).delete(place.linePos, place.linePos + place.line.nodeSize)
  const at = place.block.childCount === 1 ? place.blockPos + 1 : blockEnd(place) - place.line.nodeSize + 1
  return tr.setSelection(TextSelection.create(tr.doc, at))
}

/** The next line; in the middle of a formula the rest of it moves there. */
function nextLine(state: EditorState, place: LinePlace): Transaction {
  const tr = state.tr.deleteSelection()
  const after = place.text.slice(state.selection.$to.parentOffset)
  const before = place.text.slice(0, place.offset)
  if (before === '' && after !== '') {
    tr.insert(place.linePos, makeLine(state.schema))
    return tr
  }
  tr.delete(place.start + before.length, place.start + before.length + after.length)
  const linePos = tr.mapping.map(place.linePos + place.line.nodeSize)
  tr.insert(linePos, makeLine(state.schema, after))
  return caretIntoLine(tr, linePos, 'source', 'start')
}

export const enter: Command = (state, dispatch) => {
  const place = linePlace(state)
  if (!place) return false
  if (place.part === 'reference') return moveToLine(state, dispatch, place, 1, 'source', 'end')
  const empty = lineText(place.line, 'source') === '' && lineText(place.line, 'reference') === ''
  const leaves = empty && place.index === place.block.childCount - 1
  dispatch?.((leaves ? leaveBlock(state, place) : nextLine(state, place)).scrollIntoView())
  return true
}

/** To another line of the block; past its end a new line is made, past its start nothing. */
function moveToLine(state: EditorState, dispatch: Dispatch, place: LinePlace, by: 1 | -1, part: 'source' | 'reference', where: 'start' | 'end'): boolean {
  const target = siblingLine(place, by)
  if (target === null && by === -1) return false
  const tr = state.tr
  if (target === null) {
    const at = place.linePos + place.line.nodeSize
    tr.insert(at, makeLine(state.schema))
    caretIntoLine(tr, at, part, where)
  }
  else caretIntoLine(tr, target, part, where)
  dispatch?.(tr.scrollIntoView())
  return true
}

/** Tab: formula → its reference → the next line's formula. Leaves the editor after the last line, so that Tab is no trap. */
export const tab: Command = (state, dispatch) => {
  const place = linePlace(state)
  if (!place) return false
  if (place.part === 'source') {
    dispatch?.(caretIntoLine(state.tr, place.linePos, 'reference').scrollIntoView())
    return true
  }
  const target = siblingLine(place, 1)
  if (target === null) return false
  dispatch?.(caretIntoLine(state.tr, target, 'source').scrollIntoView())
  return true
}

export const shiftTab: Command = (state, dispatch) => {
  const place = linePlace(state)
  if (!place) return false
  if (place.part === 'reference') {
    dispatch?.(caretIntoLine(state.tr, place.linePos, 'source').scrollIntoView())
    return true
  }
  return moveToLine(state, dispatch, place, -1, 'reference', 'end')
}

/** Joins a line to the one before it; the earlier line keeps its mark, and its reference unless it has none. */
function joinLines(state: EditorState, earlierPos: number, laterPos: number): Transaction | null {
  const earlier = state.doc.nodeAt(earlierPos)
  const later = state.doc.nodeAt(laterPos)
  if (!earlier || !later) return null
  const source = lineText(earlier, 'source')
  const reference = [lineText(earlier, 'reference'), lineText(later, 'reference')].filter(Boolean).join('; ')
  const kept = source === '' ? later : earlier
  const joined = makeLine(state.schema, source + lineText(later, 'source'), reference, kept.attrs.status)
  const line = kept.type.create({ ...joined.attrs, id: kept.attrs.id }, joined.content)
  const tr = state.tr.replaceWith(earlierPos, laterPos + later.nodeSize, line)
  return caretIntoLine(tr, earlierPos, 'source', source.length)
}

/** Backspace at the start of a formula: an empty line goes, a line with text joins the one above. */
export const backspace: Command = (state, dispatch) => {
  const place = linePlace(state)
  if (!place || !state.selection.empty || place.offset > 0) return false
  if (place.part === 'reference') return true
  const before = siblingLine(place, -1)
  const empty = lineText(place.line, 'source') === '' && lineText(place.line, 'reference') === ''
  if (before === null) {
    if (empty) dispatch?.((place.block.childCount === 1 ? leaveBlock(state, place) : removeFirstLine(state, place)).scrollIntoView())
    return true
  }
  const tr = joinLines(state, before, place.linePos)
  if (tr) dispatch?.(tr.scrollIntoView())
  return true
}

function removeFirstLine(state: EditorState, place: LinePlace): Transaction {
  const tr = state.tr.delete(place.linePos, place.linePos + place.line.nodeSize)
  return caretIntoLine(tr, place.linePos, 'source', 'start')
}

/** Delete at the end of a formula draws the line below up to it. */
export const deleteForward: Command = (state, dispatch) => {
  const place = linePlace(state)
  if (!place || !state.selection.empty || place.offset < place.text.length) return false
  const after = place.part === 'source' ? siblingLine(place, 1) : null
  const tr = after === null ? null : joinLines(state, place.linePos, after)
  if (tr) dispatch?.(tr.scrollIntoView())
  return true
}

/** Up and down between lines, and out of the block at its ends. */
function vertical(by: 1 | -1): Command {
  return (state, dispatch, view) => {
    const place = linePlace(state)
    if (!place) return intoLines(state, dispatch, view, by)
    if (view && !view.endOfTextblock(by === 1 ? 'down' : 'up')) return false
    const line = siblingLine(place, by)
    if (line !== null) {
      dispatch?.(caretIntoLine(state.tr, line, place.part, place.offset).scrollIntoView())
      return true
    }
    const edge = state.doc.resolve(by === 1 ? blockEnd(place) : place.blockPos)
    const neighbour = by === 1 ? edge.nodeAfter : edge.nodeBefore
    if (!neighbour) return true
    const pos = by === 1 ? edge.pos : edge.pos - neighbour.nodeSize
    dispatch?.(caretIntoBlock(state.tr, pos, by === 1 ? 'start' : 'end').scrollIntoView())
    return true
  }
}

/** From prose into the block of lines beside it. */
function intoLines(state: EditorState, dispatch: Dispatch, view: EditorView | undefined, by: 1 | -1): boolean {
  const { $head, empty } = state.selection
  if (!empty || $head.depth === 0 || (view && !view.endOfTextblock(by === 1 ? 'down' : 'up'))) return false
  // Inside a list or a table the caret first goes through what is left of it.
  const lastWithin = by === 1 ? $head.end($head.depth) + $head.depth === $head.after(1) : $head.start($head.depth) - $head.depth === $head.before(1)
  if (!lastWithin) return false
  const edge = state.doc.resolve(by === 1 ? $head.after(1) : $head.before(1))
  const neighbour = by === 1 ? edge.nodeAfter : edge.nodeBefore
  if (!neighbour || !isLinesBlock(neighbour)) return false
  dispatch?.(caretIntoBlock(state.tr, by === 1 ? edge.pos : edge.pos - neighbour.nodeSize, by === 1 ? 'start' : 'end').scrollIntoView())
  return true
}

/** Left and right at the ends of a formula go to the neighbouring line, from a reference to its formula. */
function horizontal(by: 1 | -1): Command {
  return (state, dispatch) => {
    const place = linePlace(state)
    if (!place || !state.selection.empty) return false
    if (place.offset !== (by === 1 ? place.text.length : 0)) return false
    if (place.part === 'reference') {
      if (by === 1) dispatch?.(caretIntoLine(state.tr, place.linePos, 'source', 'start').scrollIntoView())
      return true
    }
    const line = siblingLine(place, by)
    if (line === null) return vertical(by)(state, dispatch)
    dispatch?.(caretIntoLine(state.tr, line, 'source', by === 1 ? 'start' : 'end').scrollIntoView())
    return true
  }
}

/** At the edge of prose beside a block of lines: empty prose goes, and the caret enters the lines. */
function proseEdge(by: 1 | -1): Command {
  return (state, dispatch) => {
    const { $head, empty } = state.selection
    if (!empty || $head.depth !== 1 || $head.parentOffset !== (by === 1 ? $head.parent.content.size : 0)) return false
    const edge = state.doc.resolve(by === 1 ? $head.after(1) : $head.before(1))
    const neighbour = by === 1 ? edge.nodeAfter : edge.nodeBefore
    if (!neighbour || !isLinesBlock(neighbour)) return false
    const tr = state.tr
    const pos = by === 1 ? edge.pos : edge.pos - neighbour.nodeSize
    if ($head.parent.content.size === 0) tr.delete($head.before(1), $head.after(1))
    dispatch?.(caretIntoBlock(tr, tr.mapping.map(pos), by === 1 ? 'start' : 'end').scrollIntoView())
    return true
  }
}

const either = (...commands: Command[]): Command => (state, dispatch, view) => commands.some(command => command(state, dispatch, view))

const KEYS: Record<string, Command> = {
  'Enter': enter,
  'Shift-Enter': enter,
  'Tab': tab,
  'Shift-Tab': shiftTab,
  'Backspace': either(backspace, proseEdge(-1)),
  'Delete': either(deleteForward, proseEdge(1)),
  'ArrowUp': vertical(-1),
  'ArrowDown': vertical(1),
  'ArrowLeft': horizontal(-1),
  'ArrowRight': horizontal(1),
}

export const LineKeys = Extension.create({
  name: 'lineKeys',
  priority: 1100,
  addCommands() {
    return {
      enterReference: linePos => ({ state, tr, dispatch }) => {
        const pos = linePos ?? linePlace(state)?.linePos ?? -1
        if (pos < 0 || state.doc.nodeAt(pos)?.type.name !== 'line') return false
        if (dispatch) caretIntoLine(tr, pos, 'reference').scrollIntoView()
        queueMicrotask(() => this.editor.view.focus())
        return true
      },
    }
  },
  addKeyboardShortcuts() {
    const entries = Object.entries(KEYS).map(([key, command]) => [key, () => {
      const { view } = this.editor
      return command(view.state, view.dispatch.bind(view), view)
    }] as const)
    return Object.fromEntries(entries)
  },
})
