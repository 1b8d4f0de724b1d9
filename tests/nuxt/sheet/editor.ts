/** An editor of a sheet without a page around it, for tests. */
import { Editor } from '@tiptap/core'
import { Collaboration } from '@tiptap/extension-collaboration'
import * as Y from 'yjs'
import { Blocks } from '~/components/sheet/extensions/blocks'
import { documentExtensions } from '~/components/sheet/extensions'
import { Identity, OnlyRead } from '~/components/sheet/extensions/identity'
import { LineKeys } from '~/components/sheet/extensions/lineKeys'
import { createSheetEditorHub } from '~/composables/useSheetEditorHub'
import { lineText } from '~/components/sheet/extensions/lines'

const Stub = { template: '<div />' }

export function sheetEditor(ydoc = new Y.Doc()) {
  const hub = createSheetEditorHub(() => Promise.resolve(null))
  const editor = new Editor({
    element: document.body.appendChild(document.createElement('div')),
    extensions: [...documentExtensions(hub, { response: Stub, figure: Stub }), Identity, OnlyRead, LineKeys, Blocks, Collaboration.configure({ fragment: ydoc.getXmlFragment('sheet') })],
  })
  return { editor, hub, ydoc }
}

export const line = (id: string, source: string, reference = '', status: string | null = null) => ({
  type: 'line',
  attrs: { id, status },
  content: [
    { type: 'source', ...(source ? { content: [{ type: 'text', text: source }] } : {}) },
    { type: 'reference', ...(reference ? { content: [{ type: 'text', text: reference }] } : {}) },
  ],
})
export const calculation = (id: string, ...content: ReturnType<typeof line>[]) => ({ type: 'calculation', attrs: { id, reference: '' }, content })
export const paragraph = (id: string, text = '') => ({ type: 'paragraph', attrs: { id, reference: '' }, ...(text ? { content: [{ type: 'text', text }] } : {}) })
export const sheet = (...content: object[]) => ({ type: 'doc', content })

/** Lines as `source | reference`. */
export function linesIn(editor: Editor): string[] {
  const lines: string[] = []
  editor.state.doc.descendants((node) => {
    if (node.type.name === 'line') lines.push(`${lineText(node, 'source')} | ${lineText(node, 'reference')}`)
  })
  return lines
}

/** Kinds of the blocks, in order. */
export const kindsIn = (editor: Editor): string[] => editor.state.doc.children.map(node => node.type.name)

/** Puts the caret `offset` characters into the `nth` text of a kind. */
export function caretAt(editor: Editor, kind: string, nth: number, offset: number): void {
  const found: number[] = []
  editor.state.doc.descendants((node, pos) => {
    if (node.type.name === kind) found.push(pos)
  })
  const pos = found[nth]
  if (pos === undefined) throw new Error(`There is no ${kind} number ${nth}.`)
  editor.commands.setTextSelection(pos + 1 + offset)
}

/** What is typed where the caret is, by the name of its node and its offset. */
export function caret(editor: Editor): string {
  const { $from } = editor.state.selection
  return `${$from.parent.type.name} ${$from.parent.textContent} @${$from.parentOffset}`
}

export function press(editor: Editor, key: string, keys: KeyboardEventInit = {}): boolean {
  const event = new KeyboardEvent('keydown', { key, bubbles: true, cancelable: true, ...keys })
  return editor.view.someProp('handleKeyDown', handle => handle(editor.view, event)) === true
}
