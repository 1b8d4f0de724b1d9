/**
 * Prose: what the common editor extensions give, with the sheet's attributes and with content
 * expressions that hold whatever order a merge of two people's edits may bring.
 */
import { Mark, type Attribute } from '@tiptap/core'
import { Document } from '@tiptap/extension-document'
import { BulletList, ListItem, ListKeymap, OrderedList } from '@tiptap/extension-list'
import { Heading } from '@tiptap/extension-heading'
import { Link } from '@tiptap/extension-link'
import { Paragraph } from '@tiptap/extension-paragraph'
import { Table, TableCell, TableHeader, TableRow } from '@tiptap/extension-table'
import { blockAttributes } from './attributes'
import { isAllowedLink } from '#shared/document/schema'
import { proseView } from '../views/proseView'
import type { SheetEditorHub } from '~/composables/useSheetEditorHub'

const NESTED = '(paragraph | bulletList | orderedList)*'

export const SheetRoot = Document.extend({ content: 'block*' })

const Subscript = Mark.create({
  name: 'subscript',
  excludes: 'superscript',
  parseHTML: () => [{ tag: 'sub' }],
  renderHTML: () => ['sub', 0],
  addKeyboardShortcuts() {
    return { 'Mod-,': () => this.editor.commands.toggleMark(this.name) }
  },
})

const Superscript = Mark.create({
  name: 'superscript',
  excludes: 'subscript',
  parseHTML: () => [{ tag: 'sup' }],
  renderHTML: () => ['sup', 0],
  addKeyboardShortcuts() {
    return { 'Mod-.': () => this.editor.commands.toggleMark(this.name) }
  },
})

/** A link is its address and nothing else; how it opens is the same for all. */
const SheetLink = Link.extend({
  inclusive: false,
  addAttributes: () => ({ href: { default: '', parseHTML: element => element.getAttribute('href') ?? '' } }),
}).configure({
  openOnClick: false,
  autolink: true,
  linkOnPaste: true,
  defaultProtocol: 'https',
  isAllowedUri: address => isAllowedLink(address),
  HTMLAttributes: { rel: 'noopener noreferrer', target: '_blank', class: null },
})

/** The span of a cell, from copied markup too, within the bounds of a sheet. */
function span(name: 'colspan' | 'rowspan', most: number): Partial<Attribute> {
  return {
    default: 1,
    parseHTML: element => Math.min(most, Math.max(1, Math.trunc(Number(element.getAttribute(name)) || 1))),
  }
}

const cellAttributes = () => ({ colspan: span('colspan', 50), rowspan: span('rowspan', 500), colwidth: { default: null, rendered: false } })

/** Headings, paragraphs, lists, tables, links and marks; top-level ones lie in the three columns. */
export function proseExtensions(hub: SheetEditorHub) {
  const view = () => proseView(hub)
  return [
    Heading.extend({ addAttributes() { return { ...this.parent?.(), ...blockAttributes() } }, addNodeView: view }).configure({ levels: [1, 2, 3] }),
    Paragraph.extend({ addAttributes: blockAttributes, addNodeView: view }),
    BulletList.extend({ content: 'listItem*', addAttributes: blockAttributes, addNodeView: view }),
    OrderedList.extend({
      content: 'listItem*',
      addAttributes: () => ({ ...blockAttributes(), start: { default: 1, validate: 'number' } }),
      addNodeView: view,
    }),
    ListItem.extend({ content: NESTED }),
    ListKeymap,
    Table.extend({ content: 'tableRow*', addAttributes: blockAttributes, addNodeView: view }).configure({ resizable: false }),
    TableRow,
    TableCell.extend({ content: NESTED, addAttributes: cellAttributes }),
    TableHeader.extend({ content: NESTED, addAttributes: cellAttributes }),
    SheetLink,
    Subscript,
    Superscript,
  ]
}
