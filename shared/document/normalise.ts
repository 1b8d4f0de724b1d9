import type { RawNode } from './tree'
import { rawChildren } from './tree'
import { SHEET_MARKS } from './schema'

/**
 * Puts a document into the one form that means it: marks in the schema's order, neighbouring texts of equal marks joined,
 * text of lines without marks, attributes that say nothing left out. Expects a tree within bounds.
 */

interface Mark { type: string, attrs?: Record<string, unknown> }

const MARK_ORDER = Object.keys(SHEET_MARKS)
const rank = (mark: Mark) => {
  const place = MARK_ORDER.indexOf(mark.type)
  return place === -1 ? MARK_ORDER.length : place
}

function attributesOf(value: unknown): Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value) ? { ...value } : {}
}

function marksOf(node: RawNode): Mark[] {
  if (!Array.isArray(node.marks)) return []
  const marks = node.marks
    .map((mark: unknown): Mark => {
      const { type, attrs } = attributesOf(mark)
      const href = attributesOf(attrs).href
      return { type: String(type), ...(type === 'link' ? { attrs: { href } } : {}) }
    })
    .sort((a, b) => rank(a) - rank(b))
  return marks.filter((mark, index) => marks.findIndex(other => other.type === mark.type) === index)
}

function normaliseText(node: RawNode, plain: boolean): RawNode {
  const marks = plain ? [] : marksOf(node)
  return { type: 'text', text: node.text, ...(marks.length > 0 ? { marks } : {}) }
}

function joined(nodes: RawNode[]): RawNode[] {
  const result: RawNode[] = []
  for (const node of nodes) {
    const last = result.at(-1)
    const joins = last?.type === 'text' && node.type === 'text' && typeof last.text === 'string' && typeof node.text === 'string'
      && JSON.stringify(last.marks) === JSON.stringify(node.marks)
    if (joins) result[result.length - 1] = { ...last, text: `${last.text as string}${node.text as string}` }
    else result.push(node)
  }
  return result.filter(node => node.type !== 'text' || node.text !== '')
}

const NESTED_WITHOUT_ID = new Set(['paragraph', 'bulletList', 'orderedList', 'listItem', 'tableRow', 'tableCell', 'tableHeader', 'table'])
const SAYS_NOTHING: Record<string, unknown> = { colspan: 1, rowspan: 1, colwidth: null }

function attributes(node: RawNode, depth: number): Record<string, unknown> {
  const attrs = attributesOf(node.attrs)
  if (depth > 1 && NESTED_WITHOUT_ID.has(String(node.type))) {
    delete attrs.id
    delete attrs.reference
  }
  for (const [name, value] of Object.entries(SAYS_NOTHING)) {
    if (attrs[name] === value) Reflect.deleteProperty(attrs, name)
  }
  return attrs
}

/** `depth` is 0 for the document, 1 for its blocks. */
export function normalise(node: RawNode, depth = 0, plain = false): RawNode {
  if (node.type === 'text') return normaliseText(node, plain)
  const attrs = attributes(node, depth)
  const texts = node.type === 'source' || node.type === 'reference'
  const content = joined(rawChildren(node).map(child => normalise(child, depth + 1, texts)))
  return {
    type: node.type,
    ...(Object.keys(attrs).length > 0 ? { attrs } : {}),
    ...(content.length > 0 || depth === 0 ? { content } : {}),
  }
}
