import { Node, type Editor } from '@tiptap/core'
import { NodeSelection } from '@tiptap/pm/state'
import { VueNodeViewRenderer } from '@tiptap/vue-3'
import type { Component } from 'vue'
import { EDIT_EVENT } from '../views/inlineMathView'
import { blockAttributes, switchAttribute, textAttribute } from './attributes'

/** Enter on a selected block opens what can be set in it. */
function openSelected(editor: Editor, name: string): boolean {
  const { selection } = editor.state
  if (!(selection instanceof NodeSelection) || selection.node.type.name !== name) return false
  const dom = editor.view.nodeDOM(selection.from)
  const row = dom instanceof HTMLElement ? dom.querySelector('.row-block') ?? dom : null
  return row?.dispatchEvent(new Event(EDIT_EVENT)) ?? false
}

/** The response of a transfer function: an atom whose form and plot are a component. */
export const Response = (view: Component) => Node.create({
  name: 'response',
  group: 'block',
  atom: true,
  selectable: true,
  draggable: false,
  addAttributes: () => ({
    ...blockAttributes(),
    transfer: textAttribute('transfer'),
    from: textAttribute('from'),
    to: textAttribute('to'),
    showPhase: switchAttribute('showPhase', true),
    showStep: switchAttribute('showStep', false),
    showAsymptotes: switchAttribute('showAsymptotes', true),
    duration: textAttribute('duration'),
    supply: textAttribute('supply'),
    rating: textAttribute('rating'),
    caption: textAttribute('caption'),
  }),
  parseHTML: () => [{ tag: 'div[data-response]' }],
  renderHTML: ({ HTMLAttributes }) => ['div', { ...HTMLAttributes, 'data-response': '' }],
  renderText: ({ node }) => `Response of ${node.attrs.transfer}`,
  addNodeView: () => VueNodeViewRenderer(view, { stopEvent: () => true }),
  addKeyboardShortcuts() {
    return { Enter: () => openSelected(this.editor, this.name) }
  },
})

/** A picture, by the id of an attachment of the project only: an address never enters a sheet. */
export const Figure = (view: Component) => Node.create({
  name: 'figure',
  group: 'block',
  atom: true,
  selectable: true,
  draggable: false,
  addAttributes: () => ({
    ...blockAttributes(),
    attachment: textAttribute('attachment'),
    caption: textAttribute('caption'),
    alt: textAttribute('alt'),
  }),
  parseHTML: () => [{ tag: 'figure[data-attachment]' }],
  renderHTML: ({ HTMLAttributes }) => ['figure', HTMLAttributes],
  renderText: ({ node }) => String(node.attrs.caption),
  addNodeView: () => VueNodeViewRenderer(view, { stopEvent: () => true }),
  addKeyboardShortcuts() {
    return { Enter: () => openSelected(this.editor, this.name) }
  },
})
