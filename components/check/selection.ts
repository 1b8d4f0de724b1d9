/** What of a sheet's text is selected, as the target of an annotation. */
import type { AnnotationTarget } from '~/composables/useCheck'

const LONGEST_QUOTE = 500

/** Characters of `root` before the point; null when the point is outside it. */
function offsetIn(root: Element, node: Node, offset: number): number | null {
  if (!root.contains(node)) return null
  const range = root.ownerDocument.createRange()
  range.setStart(root, 0)
  range.setEnd(node, offset)
  return range.toString().length
}

const element = (node: Node | null) => node instanceof Element ? node : node?.parentElement ?? null

/** Whether the text of the element is the text of the document, character for character: typeset mathematics is not. */
const isPlain = (root: Element) => root.querySelector('.katex, .math-plain, br') === null

/** Null unless something is selected inside the calculation column of one single row. */
export function selectedTarget(selection: Selection | null): AnnotationTarget | null {
  if (!selection || selection.isCollapsed || selection.rangeCount === 0) return null
  const range = selection.getRangeAt(0)
  const cell = element(range.commonAncestorContainer)?.closest('.row-calculation')
  const blockId = cell?.closest('[data-row]')?.getAttribute('data-row')
  const quote = selection.toString().replace(/\s+/g, ' ').trim().slice(0, LONGEST_QUOTE)
  if (!cell || !blockId || quote === '') return null
  const root = element(range.commonAncestorContainer)?.closest('.line-source, .paper-prose > p, .paper-prose > :is(h2, h3, h4)')
  if (!root || !isPlain(root)) return { blockId, quote, from: null, to: null }
  return {
    blockId, quote,
    from: offsetIn(root, range.startContainer, range.startOffset),
    to: offsetIn(root, range.endContainer, range.endOffset),
  }
}
