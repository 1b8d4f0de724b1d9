/** Everything that can be done in the editor, for the list of Actions. */
import type { Editor } from '@tiptap/vue-3'
import { INSERT_KINDS, type InsertKind } from './insertKinds'
import { linePlace } from './extensions/place'
import type { Action } from '~/composables/useActions'

export interface PadVerbs {
  insert: (kind: InsertKind) => void
  openInsert: () => void
  editLink: () => void
}

const STATUS_ACTIONS = [
  ['given', 'Mark the input as given', 'Alt+G'],
  ['assumed', 'Mark the input as assumed', 'Alt+A'],
  ['hold', 'Mark the input as a hold', 'Alt+H'],
  [null, 'Take the mark off the input', 'Alt+N'],
] as const

function lineActions(editor: Editor): Action[] {
  const place = linePlace(editor.state)
  const why = place ? null : 'the caret is in no line'
  return [
    ...STATUS_ACTIONS.map(([status, label, keys]) => ({
      id: `status-${status}`, label, keys, why, group: 'Line',
      run: () => { if (place) editor.chain().focus().command(({ tr }) => Boolean(tr.setNodeAttribute(place.linePos, 'status', status))).run() },
    })),
    { id: 'reference', label: 'Go to the reference of the line', keys: 'Alt+R', why, group: 'Line', run: () => { editor.commands.enterReference() } },
  ]
}

function textActions(editor: Editor, verbs: PadVerbs): Action[] {
  const prose = editor.isActive('paragraph') || editor.isActive('heading')
  const why = prose ? null : 'the caret is in no text'
  const run = (id: string, label: string, keys: string | undefined, act: () => unknown): Action => ({ id, label, keys, why, group: 'Text', run: () => { act() } })
  const chain = () => editor.chain().focus()
  return [
    run('bold', 'Bold', 'Ctrl+B', () => chain().toggleBold().run()),
    run('italic', 'Italic', 'Ctrl+I', () => chain().toggleItalic().run()),
    run('subscript', 'Subscript', 'Ctrl+,', () => chain().toggleMark('subscript').run()),
    run('superscript', 'Superscript', 'Ctrl+.', () => chain().toggleMark('superscript').run()),
    run('link', 'Link…', 'Ctrl+K', verbs.editLink),
    run('inline-math', 'Mathematics in the text', 'Alt+I', () => chain().insertInlineMath().run()),
    run('turn-text', 'Turn into text', 'Ctrl+Alt+0', () => chain().setParagraph().run()),
    ...([1, 2, 3] as const).map(level => run(`turn-${level}`, `Turn into heading ${level}`, `Ctrl+Alt+${level}`, () => chain().setHeading({ level }).run())),
    run('turn-list', 'Turn into a list', 'Ctrl+Shift+8', () => chain().toggleBulletList().run()),
    run('turn-numbered', 'Turn into a numbered list', 'Ctrl+Shift+7', () => chain().toggleOrderedList().run()),
  ]
}

function tableActions(editor: Editor): Action[] {
  if (!editor.isActive('table')) return []
  const chain = () => editor.chain().focus()
  const all: [string, string, () => unknown][] = [
    ['row-below', 'Add a row below', () => chain().addRowAfter().run()],
    ['row-above', 'Add a row above', () => chain().addRowBefore().run()],
    ['column-right', 'Add a column to the right', () => chain().addColumnAfter().run()],
    ['column-left', 'Add a column to the left', () => chain().addColumnBefore().run()],
    ['delete-row', 'Delete the row of the table', () => chain().deleteRow().run()],
    ['delete-column', 'Delete the column of the table', () => chain().deleteColumn().run()],
    ['header-row', 'Heading row on or off', () => chain().toggleHeaderRow().run()],
    ['merge-cells', 'Merge or divide cells', () => chain().mergeOrSplit().run()],
  ]
  return all.map(([id, label, act]) => ({ id, label, group: 'Table', run: () => { act() } }))
}

function rowActions(editor: Editor): Action[] {
  const chain = () => editor.chain().focus()
  return [
    { id: 'move-up', label: 'Move the line or block up', keys: 'Alt+ArrowUp', group: 'Block', run: () => { chain().moveRow(-1).run() } },
    { id: 'move-down', label: 'Move the line or block down', keys: 'Alt+ArrowDown', group: 'Block', run: () => { chain().moveRow(1).run() } },
    { id: 'duplicate', label: 'Duplicate the line or block', keys: 'Alt+Shift+D', group: 'Block', run: () => { chain().duplicateRow().run() } },
    { id: 'remove', label: 'Delete the line or block', keys: 'Alt+Shift+X', group: 'Block', run: () => { chain().removeRow().run() } },
    { id: 'undo', label: 'Undo', keys: 'Ctrl+Z', group: 'Block', run: () => { editor.commands.undo() } },
    { id: 'redo', label: 'Do again', keys: 'Ctrl+Y', group: 'Block', run: () => { editor.commands.redo() } },
  ]
}

export function padActions(editor: Editor | undefined, verbs: PadVerbs): Action[] {
  if (!editor?.isEditable) return []
  return [
    { id: 'insert', label: 'Insert a block below…', keys: 'Ctrl+Enter', group: 'Insert', run: verbs.openInsert },
    ...INSERT_KINDS.map(kind => ({ id: `insert-${kind.kind}`, label: `Insert ${kind.label.toLowerCase()}`, group: 'Insert', run: () => verbs.insert(kind) })),
    ...lineActions(editor),
    ...textActions(editor, verbs),
    ...tableActions(editor),
    ...rowActions(editor),
  ]
}
