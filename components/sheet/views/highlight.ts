/** Underlines the place of a problem within a typed line without touching the text (CSS Custom Highlight API). */
import type { Problem, SourceRange } from '#shared/engine/types'

const NAMES = { error: 'sheet-error', warning: 'sheet-warning' } as const

function registry(severity: Problem['severity']): Highlight | null {
  if (typeof CSS === 'undefined' || !('highlights' in CSS) || typeof Highlight === 'undefined') return null
  const name = NAMES[severity]
  const present = CSS.highlights.get(name)
  if (present) return present
  const made = new Highlight()
  CSS.highlights.set(name, made)
  return made
}

/** A DOM range over offsets of an element's own text; carets of colleagues inside it do not count. */
export function rangeOf(host: Element, at: SourceRange): Range | null {
  const walker = document.createTreeWalker(host, NodeFilter.SHOW_TEXT, node =>
    node.parentElement?.closest('[data-caret]') ? NodeFilter.FILTER_REJECT : NodeFilter.FILTER_ACCEPT)
  const range = document.createRange()
  let offset = 0
  let started = false
  for (let node = walker.nextNode(); node; node = walker.nextNode()) {
    const length = node.textContent?.length ?? 0
    if (!started && at.from <= offset + length) {
      range.setStart(node, Math.max(0, at.from - offset))
      started = true
    }
    if (started && at.to <= offset + length) {
      range.setEnd(node, Math.max(0, at.to - offset))
      return range
    }
    offset += length
  }
  return null
}

/** Shows the places of `problems` in `host` and returns what takes them away again. */
export function underline(host: Element, problems: readonly Problem[]): () => void {
  const undo: (() => void)[] = []
  for (const problem of problems) {
    const range = problem.at && problem.at.to > problem.at.from ? rangeOf(host, problem.at) : null
    const highlight = range && registry(problem.severity)
    if (!range || !highlight) continue
    highlight.add(range)
    undo.push(() => highlight.delete(range))
  }
  return () => undo.forEach(step => step())
}
