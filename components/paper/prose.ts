/**
 * A prose block as virtual nodes. Nothing of the document becomes markup by itself: kinds, marks and link schemes
 * are those listed here, everything else is shown as its text.
 */
import { h, type VNode, type VNodeChild } from 'vue'
import type { InlineNode, ProseBlock, ProseContent, TextMark, TextNode } from '#shared/document/types'
import MathText from '../math/Text.vue'

/** LaTeX of an inline formula as far as it is known. */
export type InlineMath = (source: string) => string | undefined

const MARKS: Partial<Record<TextMark['type'], string>> = { bold: 'strong', italic: 'em', subscript: 'sub', superscript: 'sup' }
const HEADINGS = ['h2', 'h3', 'h4'] as const
const DEEPEST = 32

/** Only links that lead somewhere harmless; anything else stays text. */
export function safeHref(href: unknown): string | null {
  if (typeof href !== 'string' || !/^(https?:\/\/|mailto:)/i.test(href.trim())) return null
  return href.trim()
}

function marked(node: TextNode): VNodeChild {
  return (node.marks ?? []).reduce<VNodeChild>((inner, mark) => {
    const tag = MARKS[mark.type]
    if (tag) return h(tag, [inner])
    const href = mark.type === 'link' ? safeHref(mark.attrs?.href) : null
    return href ? h('a', { href, rel: 'noopener noreferrer', target: '_blank' }, [inner]) : inner
  }, node.text)
}

function inline(node: InlineNode, math: InlineMath): VNodeChild {
  if (node.type === 'text') return marked(node)
  if (node.type === 'hardBreak') return h('br')
  const latex = math(node.attrs.source)
  return latex ? h(MathText, { latex }) : h('code', { class: 'math-plain' }, node.attrs.source)
}

const span = (value: unknown): number | undefined => typeof value === 'number' && value > 1 && value <= 100 ? Math.trunc(value) : undefined
const WRAPPERS = { listItem: 'li', paragraph: 'p', bulletList: 'ul', orderedList: 'ol', tableRow: 'tr', tableCell: 'td', tableHeader: 'th' } as const

function children(content: ProseContent[] | undefined, math: InlineMath, depth: number): VNodeChild[] {
  return depth > DEEPEST ? [] : (content ?? []).map(node => nested(node, math, depth))
}

function nested(node: ProseContent, math: InlineMath, depth: number): VNodeChild {
  if (node.type === 'text' || node.type === 'hardBreak' || node.type === 'inlineMath') return inline(node, math)
  const inner = children(node.content, math, depth + 1)
  if (node.type === 'tableCell' || node.type === 'tableHeader') {
    return h(WRAPPERS[node.type], { colspan: span(node.attrs?.colspan), rowspan: span(node.attrs?.rowspan), scope: node.type === 'tableHeader' ? 'col' : undefined }, inner)
  }
  return h(WRAPPERS[node.type], inner)
}

/** The block as it stands in the Calculation column. */
export function proseBlock(block: ProseBlock, math: InlineMath): VNode {
  const inner = children(block.content, math, 0)
  if (block.type === 'heading') {
    const level = block.attrs.level ?? 1
    return h(HEADINGS[level - 1] ?? 'h4', { class: `paper-h${level}` }, inner)
  }
  // Wide tables scroll by themselves; for the keyboard they must take the focus.
  if (block.type === 'table') return h('div', { 'class': 'paper-table', 'tabindex': 0, 'role': 'group', 'aria-label': 'Table' }, [h('table', [h('tbody', inner)])])
  if (block.type === 'orderedList') return h('ol', { start: block.attrs.start }, inner)
  return h(block.type === 'bulletList' ? 'ul' : 'p', inner)
}
