/** Calculation and requirement blocks and their lines: text of the formula, text of its reference. */
import { Node } from '@tiptap/core'
import type { Node as DocumentNode } from '@tiptap/pm/model'
import { blockAttributes, textAttribute } from './attributes'
import { lineView } from '../views/lineView'
import type { InputStatus } from '#shared/document/types'
import type { SheetEditorHub } from '~/composables/useSheetEditorHub'

const STATUSES: readonly string[] = ['given', 'assumed', 'hold']

/** The mark of an input, or null for anything that is not one. */
export function inputStatus(value: unknown): InputStatus | null {
  return typeof value === 'string' && STATUSES.includes(value) ? value as InputStatus : null
}

function linesBlock(name: 'calculation' | 'requirements', label: string) {
  return Node.create({
    name,
    group: 'block',
    content: 'line*',
    // Text of prose never runs into a line, nor a line's into prose.
    isolating: true,
    defining: true,
    addAttributes: blockAttributes,
    parseHTML: () => [{ tag: `section[data-block="${name}"]` }],
    renderHTML: ({ HTMLAttributes }) => ['section', { ...HTMLAttributes, 'data-block': name, 'class': `block-lines block-${name}`, 'aria-label': label }, 0],
  })
}

const Line = (hub: SheetEditorHub) => Node.create({
  name: 'line',
  content: '(source | reference)*',
  defining: true,
  addAttributes: () => ({
    id: textAttribute('id'),
    status: {
      default: null,
      parseHTML: element => inputStatus(element.getAttribute('data-status')),
      renderHTML: attributes => inputStatus(attributes.status) ? { 'data-status': inputStatus(attributes.status) } : {},
    },
  }),
  parseHTML: () => [{ tag: 'div[data-line]' }],
  renderHTML: ({ HTMLAttributes }) => ['div', { ...HTMLAttributes, 'data-line': '' }, 0],
  addNodeView: () => lineView(hub),
})

const Source = Node.create({
  name: 'source',
  content: 'text*',
  marks: '',
  code: true,
  whitespace: 'pre',
  defining: true,
  parseHTML: () => [{ tag: 'div[data-source]', preserveWhitespace: 'full' }],
  renderHTML: () => ['div', { 'data-source': '', 'class': 'line-source', 'spellcheck': 'false', 'autocapitalize': 'off', 'autocorrect': 'off' }, 0],
})

const Reference = Node.create({
  name: 'reference',
  content: 'text*',
  marks: '',
  defining: true,
  parseHTML: () => [{ tag: 'div[data-reference]' }],
  renderHTML: () => ['div', { 'data-reference': '', 'class': 'line-reference' }, 0],
})

export const lineExtensions = (hub: SheetEditorHub) => [
  linesBlock('calculation', 'Calculation'),
  linesBlock('requirements', 'Requirements'),
  Line(hub),
  Source,
  Reference,
]

/** Text of all children of one kind; two after a merge are both kept, with a space between. */
export function lineText(line: DocumentNode, kind: 'source' | 'reference'): string {
  const parts: string[] = []
  line.forEach((child) => {
    if (child.type.name === kind) parts.push(child.textContent)
  })
  return parts.join(' ')
}
