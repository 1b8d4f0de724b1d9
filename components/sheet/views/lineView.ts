/**
 * A line of calculation as plain DOM. The typed text (formula and reference) is the editor's; the
 * typeset formula, the result and the problems are the hub's, and change without an editor transaction.
 */
import type { Node as DocumentNode } from '@tiptap/pm/model'
import type { NodeViewRenderer, NodeViewRendererProps } from '@tiptap/core'
import type { NodeView, ViewMutationRecord } from '@tiptap/pm/view'
import { element, island, mark, typesetInto } from './dom'
import { underline } from './highlight'
import { linkRow, showPeople } from './margin'
import { outputParts } from './output'
import { keepReachable, releaseReachable } from './reachable'
import { createStatusControl } from './statusControl'
import { text } from '../extensions/attributes'
import type { RowState, SheetEditorHub } from '~/composables/useSheetEditorHub'
import type { LineResult, Problem } from '#shared/engine/types'

function problemElement(problem: Problem): HTMLElement {
  return element('p', { 'class': 'line-problem', 'data-severity': problem.severity },
    element('span', {}, problem.message),
    problem.hint ? element('span', { class: 'line-problem-hint' }, problem.hint) : null)
}

/** Problems of the document itself, which the engine does not see. */
export function structureProblems(node: DocumentNode): Problem[] {
  const counts = { source: 0, reference: 0 }
  node.forEach((child) => {
    if (child.type.name === 'source') counts.source += 1
    if (child.type.name === 'reference') counts.reference += 1
  })
  const problem = (code: string, message: string, hint: string): Problem => ({ code, severity: 'error', message, hint })
  return [
    ...counts.source > 1 ? [problem('two-formulas', 'Two formulas met in one line when edits came together.', 'Keep one of them, or put the second on a line of its own with Enter.')] : [],
    ...counts.reference > 1 ? [problem('two-references', 'Two references met in one line when edits came together.', 'Keep one of them.')] : [],
  ]
}

/** The parts of a line's row; the editor keeps what is inside `content`. */
function lineParts() {
  const content = element('div', { class: 'line-content' })
  const margin = island('row-people')
  const missing = element('button', { type: 'button', class: 'line-add-reference', tabindex: '-1' }, 'add a reference')
  const side = island('line-side', missing)
  const tag = island('row-tag line-tag')
  const formula = element('div', { class: 'line-formula' })
  const problems = element('div', { class: 'line-problems' })
  const shown = island('row-calculation line-shown', formula, problems)
  const output = island('row-output')
  const tick = island('row-tick')
  const slot = island('row-slips')
  const dom = element('div', { class: 'row row-line' }, margin, side, tag, content, shown, output, tick, slot)
  return { dom, content, margin, missing, side, tag, formula, problems, shown, output, slot }
}

class LineView implements NodeView {
  readonly dom: HTMLElement
  readonly contentDOM: HTMLElement
  private readonly parts = lineParts()
  private readonly link
  private readonly unobserve: () => void
  private readonly status
  private node: DocumentNode
  private near = false
  private result: LineResult | null = null
  private typesetKey = ''
  private clearUnderline = () => {}

  constructor(private readonly props: NodeViewRendererProps, hub: SheetEditorHub) {
    this.node = props.node
    this.dom = this.parts.dom
    this.contentDOM = this.parts.content
    this.status = createStatusControl(status => this.setStatus(status))
    this.parts.side.append(this.status.dom)
    this.parts.missing.addEventListener('click', () => this.props.editor.commands.enterReference(this.position()))
    this.link = linkRow(hub, this.parts.slot, state => this.refresh(state))
    this.unobserve = hub.observe(this.dom, () => this.comeNear())
    this.follow()
  }

  update(node: DocumentNode): boolean {
    if (node.type !== this.node.type) return false
    this.node = node
    this.follow()
    return true
  }

  stopEvent(event: Event): boolean {
    return event.target instanceof Node && this.isIsland(event.target)
  }

  ignoreMutation(mutation: ViewMutationRecord): boolean {
    return mutation.type !== 'selection' && (mutation.target === this.dom || this.isIsland(mutation.target))
  }

  destroy(): void {
    this.clearUnderline()
    this.unobserve()
    releaseReachable(this.parts.formula)
    this.link.destroy()
  }

  private comeNear(): void {
    this.near = true
    this.typeset()
  }

  private isIsland(target: Node): boolean {
    return this.dom.contains(target) && target !== this.dom && !this.contentDOM.contains(target)
  }

  private position(): number { return this.props.getPos() ?? -1 }

  private setStatus(status: string | null): void {
    const { editor } = this.props
    const pos = this.position()
    if (editor.isEditable && pos >= 0) editor.view.dispatch(editor.state.tr.setNodeAttribute(pos, 'status', status))
  }

  /** What depends on the node: its id, its status, the shape of its content. */
  private follow(): void {
    const id = text(this.node.attrs.id, 64)
    mark(this.dom, 'data-row', id)
    mark(this.dom, 'id', id ? `row-${id}` : null)
    const names = this.node.children.map(child => child.type.name)
    mark(this.dom, 'data-bare', names.includes('reference') ? null : 'true')
    mark(this.dom, 'data-crowded', new Set(names).size < names.length ? 'true' : null)
    this.link.follow(id)
    this.showStatus()
    this.showProblems()
  }

  private refresh(state: RowState): void {
    this.result = state.result
    mark(this.dom, 'data-result', state.result?.kind ?? null)
    mark(this.dom, 'data-problem', state.result && state.result.status !== 'ok' ? state.result.status : null)
    this.parts.output.replaceChildren(...outputParts(state.result))
    this.parts.tag.textContent = state.requirement ? `Req ${state.requirement}` : ''
    showPeople(this.dom, this.parts.margin, state)
    this.showStatus()
    this.showProblems()
    this.typeset()
  }

  /** Only an input has a status: a value that uses no other name. */
  private showStatus(): void {
    const input = this.result?.kind === 'value' && this.result.uses.length === 0 && this.result.defines !== undefined
    this.status.show(this.node.attrs.status, input, this.props.editor.isEditable)
  }

  private showProblems(): void {
    const problems = [...structureProblems(this.node), ...this.result?.problems ?? []]
    this.parts.problems.replaceChildren(...problems.map(problemElement))
    this.clearUnderline()
    this.clearUnderline = () => {}
    const marked = this.result?.problems.filter(problem => problem.at) ?? []
    const source = marked.length ? this.contentDOM.querySelector('.line-source') : null
    if (source) this.clearUnderline = underline(source, marked)
  }

  /** Formula, then the formula with its numbers; set only near the screen and only when it changed. */
  private typeset(): void {
    if (!this.near) return
    const { formula, substituted } = this.result?.typeset ?? {}
    const key = JSON.stringify([formula ?? '', substituted ?? ''])
    if (key === this.typesetKey) return
    this.typesetKey = key
    const parts = [formula, substituted ? `=${substituted}` : undefined].filter((latex): latex is string => Boolean(latex))
    this.parts.formula.replaceChildren(...parts.map((latex) => {
      const span = element('span', { class: 'line-formula-part' })
      typesetInto(span, latex)
      return span
    }))
    keepReachable(this.parts.formula)
  }
}

export function lineView(hub: SheetEditorHub): NodeViewRenderer {
  return props => new LineView(props, hub)
}
