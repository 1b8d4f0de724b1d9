/** The Output column of a line: value, unit, bounds, verdict and margins, as plain elements. */
import { element } from './dom'
import type { Bounds, LineResult, RequirementResult, ResultValue, Shown } from '#shared/engine/types'

type Part = HTMLElement

const unit = (shown: Shown) => shown.unit ? element('span', { class: 'out-unit' }, ` ${shown.unit}`) : null

const value = (shown: Shown): Part => element('span', { class: 'out-value' }, element('b', {}, shown.text), unit(shown))

const detail = (text: string): Part => element('span', { class: 'out-detail' }, text)

const plain = (shown: Shown): string => shown.unit ? `${shown.text} ${shown.unit}` : shown.text

function bounds(of: Bounds | undefined): Part[] {
  if (!of) return []
  const same = of.shownLow.unit === of.shownHigh.unit
  const low = same ? of.shownLow.text : plain(of.shownLow)
  return [element('span', { 'class': 'out-bounds', 'data-method': of.method, 'title': 'worst case' }, `${low} … ${same ? of.shownHigh.text : plain(of.shownHigh)}`)]
}

function valueParts(of: ResultValue): Part[] {
  switch (of.type) {
    case 'number': return [value(of.shown), ...bounds(of.bounds), ...of.also ? [detail(plain(of.also))] : []]
    case 'level': return [value(of.shown), ...bounds(of.bounds)]
    case 'complex': return [value(of.shown)]
    case 'unbounded': return [value(of.shown)]
    case 'text': return [element('span', { class: 'out-value' }, of.text)]
    case 'list': return of.items.slice(0, 24).map(item => element('div', {}, ...valueParts(item)))
      .concat(of.items.length > 24 ? [element('div', { class: 'out-detail' }, `and ${of.items.length - 24} more`)] : [])
    case 'transfer': return of.summary.map(detail)
    case 'function': return []
  }
}

function requirementParts(of: RequirementResult): Part[] {
  return [
    element('span', { 'class': 'verdict', 'data-verdict': of.verdict }, of.verdict),
    detail(`margin ${plain(of.margin)}`),
    detail(`nominal ${plain(of.nominalMargin)}`),
    ...of.at ? [detail(`at ${of.at}`)] : [],
  ]
}

/** What stands in the Output column for a line; empty for notes, functions and lines in error. */
export function outputParts(result: LineResult | null): Part[] {
  if (!result || result.status === 'error') return []
  const remark = result.remark ? [detail(result.remark)] : []
  if (result.requirement) return [...requirementParts(result.requirement), ...remark]
  return result.value ? [...valueParts(result.value), ...remark] : []
}

/** Words of a line's result for someone who hears the sheet. */
export function spokenResult(result: LineResult): string {
  const problem = result.problems.find(found => found.severity === 'error') ?? result.problems[0]
  if (problem) return [problem.severity === 'error' ? 'Error:' : 'Note:', problem.message, problem.hint].filter(Boolean).join(' ')
  return outputParts(result).map(part => part.textContent).join(', ')
}
