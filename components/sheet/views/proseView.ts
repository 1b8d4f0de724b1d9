/** A block of prose: at the top level a row with its Reference, inside a list or a cell just its element. */
import type { Node as DocumentNode } from '@tiptap/pm/model'
import type { NodeViewRenderer, NodeViewRendererProps } from '@tiptap/core'
import type { NodeView, ViewMutationRecord } from '@tiptap/pm/view'
import { element, island, mark } from './dom'
import { linkRow, showPeople } from './margin'
import { createReferenceField } from './referenceField'
import { text } from '../extensions/attributes'
import type { SheetEditorHub } from '~/composables/useSheetEditorHub'

/** The element that the block's text stands in, and the outermost element it needs. */
function proseElement(node: DocumentNode): { outer: HTMLElement, content: HTMLElement } {
  switch (node.type.name) {
    case 'heading': {
      const level = [1, 2, 3].includes(node.attrs.level) ? node.attrs.level as 1 | 2 | 3 : 2
      const heading = element(`h${level}`)
      return { outer: heading, content: heading }
    }
    case 'bulletList': { const list = element('ul'); return { outer: list, content: list } }
    case 'orderedList': {
      const start = Number.isInteger(node.attrs.start) ? String(node.attrs.start) : '1'
      const list = element('ol', { start })
      return { outer: list, content: list }
    }
    case 'table': {
      const body = element('tbody')
      return { outer: element('div', { class: 'paper-table' }, element('table', {}, body)), content: body }
    }
    default: { const paragraph = element('p'); return { outer: paragraph, content: paragraph } }
  }
}

const shape = (node: DocumentNode) => `${node.type.name} ${String(node.attrs.level ?? '')} ${String(node.attrs.start ?? '')}`

class ProseRow implements NodeView {
  readonly dom: HTMLElement
  readonly contentDOM: HTMLElement
  private readonly calculation: HTMLElement
  private readonly field
  private readonly link
  private node: DocumentNode

  constructor(private readonly props: NodeViewRendererProps, hub: SheetEditorHub) {
    this.node = props.node
    const { outer, content } = proseElement(this.node)
    this.contentDOM = content
    this.calculation = element('div', { class: 'row-calculation paper-prose' }, outer)
    const margin = island('row-people')
    const slot = island('row-slips')
    this.field = createReferenceField(props)
    this.dom = element('div', { class: 'row row-prose' }, margin, island('row-reference', this.field.dom), this.calculation, island('row-output'), island('row-tick'), slot)
    this.link = linkRow(hub, slot, state => showPeople(this.dom, margin, state))
    this.follow()
  }

  update(node: DocumentNode): boolean {
    if (shape(node) !== shape(this.node)) return false
    this.node = node
    this.follow()
    return true
  }

  private follow(): void {
    const id = text(this.node.attrs.id, 64)
    mark(this.dom, 'data-row', id)
    mark(this.dom, 'id', id ? `row-${id}` : null)
    this.field.show(this.node.attrs.reference)
    this.link.follow(id)
  }

  stopEvent(event: Event): boolean {
    return event.target instanceof Node && !this.calculation.contains(event.target)
  }

  ignoreMutation(mutation: ViewMutationRecord): boolean {
    return mutation.type !== 'selection' && !this.contentDOM.contains(mutation.target)
  }

  destroy(): void { this.link.destroy() }
}

/** Inside a list item or a cell there are no columns. */
function nestedView(node: DocumentNode): NodeView {
  const { outer, content } = proseElement(node)
  return { dom: outer, contentDOM: content, update: next => shape(next) === shape(node) }
}

export function proseView(hub: SheetEditorHub): NodeViewRenderer {
  return (props) => {
    const pos = props.getPos()
    const nested = pos !== undefined && props.view.state.doc.resolve(pos).depth > 0
    return nested ? nestedView(props.node) : new ProseRow(props, hub)
  }
}
