/** Mathematics within prose: typed like a line, shown typeset, never computed. */
import type { Node as DocumentNode } from '@tiptap/pm/model'
import type { NodeViewRenderer, NodeViewRendererProps } from '@tiptap/core'
import type { NodeView } from '@tiptap/pm/view'
import { element, mark, typesetInto } from './dom'
import { text } from '../extensions/attributes'
import { NAMES, type SheetEditorHub } from '~/composables/useSheetEditorHub'

/** Sent to the element of a selected formula to open it for typing. */
export const EDIT_EVENT = 'sheet:edit'

class InlineMathView implements NodeView {
  readonly dom = element('span', { class: 'inline-math', contenteditable: 'false' })
  private readonly shown = element('span', { class: 'inline-math-shown' })
  private readonly field = element('input', { 'class': 'inline-math-field', 'type': 'text', 'aria-label': 'Inline mathematics, typed as in a line', 'spellcheck': 'false', 'maxlength': '500' })
  private node: DocumentNode
  private readonly leave: () => void

  constructor(private readonly props: NodeViewRendererProps, private readonly hub: SheetEditorHub) {
    this.node = props.node
    this.dom.append(this.shown)
    this.dom.addEventListener('dblclick', () => this.open())
    this.dom.addEventListener(EDIT_EVENT, () => this.open())
    this.field.addEventListener('keydown', event => this.onKey(event))
    this.field.addEventListener('input', () => this.fit())
    this.field.addEventListener('blur', () => this.close(false))
    this.leave = hub.subscribe(NAMES, () => { void this.show() })
    void this.show()
  }

  update(node: DocumentNode): boolean {
    if (node.type !== this.node.type) return false
    const changed = node.attrs.source !== this.node.attrs.source
    this.node = node
    if (changed) void this.show()
    return true
  }

  selectNode(): void {
    mark(this.dom, 'data-selected', 'true')
    if (this.source() === '') this.open()
  }

  deselectNode(): void { mark(this.dom, 'data-selected', null) }

  stopEvent(event: Event): boolean { return event.target === this.field }

  ignoreMutation(): boolean { return true }

  destroy(): void { this.leave() }

  private source(): string { return text(this.node.attrs.source, 500) }

  private async show(): Promise<void> {
    const source = this.source()
    const latex = source ? await this.hub.typeset(source) : null
    if (source !== this.source()) return
    mark(this.dom, 'data-unreadable', source && latex === null ? 'true' : null)
    this.dom.title = source && latex === null ? `${source}: this cannot be read as a formula` : source
    if (latex === null) this.shown.textContent = source || 'formula'
    else typesetInto(this.shown, latex)
  }

  private open(): void {
    if (!this.props.editor.isEditable || this.field.isConnected) return
    this.field.value = this.source()
    this.fit()
    this.dom.append(this.field)
    // The editor's own focus handling comes after the click or the key that opened the field.
    requestAnimationFrame(() => {
      this.field.focus()
      this.field.select()
    })
  }

  private fit(): void { this.field.style.width = `${Math.max(6, this.field.value.length + 2)}ch` }

  private onKey(event: KeyboardEvent): void {
    if (event.isComposing) return
    const atEnd = this.field.selectionStart === this.field.value.length && this.field.selectionStart === this.field.selectionEnd
    if (event.key === 'Enter' || event.key === 'Tab' || event.key === 'Escape' || (event.key === 'ArrowRight' && atEnd)) {
      event.preventDefault()
      if (event.key === 'Escape') this.field.value = this.source()
      this.close(true)
    }
  }

  /** Takes what was typed over into the document; an empty formula goes away. */
  private close(refocus: boolean): void {
    if (!this.field.isConnected) return
    const value = this.field.value.trim()
    this.field.remove()
    const { editor } = this.props
    const pos = this.props.getPos()
    if (pos === undefined || !editor.isEditable) return
    const tr = editor.state.tr
    if (value === '') tr.delete(pos, pos + 1)
    else if (value !== this.source()) tr.setNodeAttribute(pos, 'source', value)
    if (tr.docChanged) editor.view.dispatch(tr)
    if (refocus) editor.commands.focus(value === '' ? pos : pos + 1)
  }
}

export function inlineMathView(hub: SheetEditorHub): NodeViewRenderer {
  return props => new InlineMathView(props, hub)
}
