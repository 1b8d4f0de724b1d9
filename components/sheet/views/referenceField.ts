/** The Reference of a block that is not made of lines: a field in the Reference column. */
import type { NodeViewRendererProps } from '@tiptap/core'
import { element } from './dom'
import { text } from '../extensions/attributes'

export interface ReferenceField {
  dom: HTMLTextAreaElement
  show: (reference: unknown) => void
}

export function createReferenceField(props: Pick<NodeViewRendererProps, 'editor' | 'getPos'>): ReferenceField {
  const field = element('textarea', { 'class': 'row-reference-field', 'rows': '1', 'maxlength': '500', 'aria-label': 'Reference of this block', 'placeholder': 'reference' })
  const { editor } = props
  field.addEventListener('input', () => {
    const pos = props.getPos()
    if (pos !== undefined && editor.isEditable) editor.view.dispatch(editor.state.tr.setNodeAttribute(pos, 'reference', field.value))
  })
  field.addEventListener('keydown', (event) => {
    const pos = props.getPos()
    const leaves = event.key === 'Escape' || event.key === 'Enter' || (event.key === 'Tab' && !event.shiftKey)
    if (!leaves || pos === undefined || event.isComposing) return
    event.preventDefault()
    editor.commands.focus(pos + 1)
  })
  return {
    dom: field,
    show(reference) {
      const value = text(reference, 500)
      if (field.value !== value) field.value = value
      field.readOnly = !editor.isEditable
      field.toggleAttribute('data-empty', value === '')
    },
  }
}
