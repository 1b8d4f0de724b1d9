/**
 * Reading a sheet's document: text of a line, requirements by number, holds. Pure; for the head of the sheet,
 * the reader and the lists.
 */
import type { LineResult, RequirementBarrier, SheetResult, Verdict } from '../engine/types'
import type { LineNode, LinesBlock, SheetBlock, SheetDocument } from './types'

export const isLinesBlock = (block: SheetBlock): block is LinesBlock => block.type === 'calculation' || block.type === 'requirements'

/** Text of all children of one kind; more than one after a merge are joined, since nothing typed may vanish. */
function partText(line: LineNode, part: 'source' | 'reference'): string {
  return (line.content ?? [])
    .filter(child => child.type === part)
    .map(child => (child.content ?? []).map(text => text.text).join(''))
    .join(' ')
}
export const lineSource = (line: LineNode): string => partText(line, 'source')
export const lineReference = (line: LineNode): string => partText(line, 'reference')

/** Lines of the sheet in reading order. */
export const linesInOrder = (document: SheetDocument): LineNode[] =>
  document.content.filter(isLinesBlock).flatMap(block => block.content ?? [])

export const resultsById = (results: SheetResult): Map<string, LineResult> => new Map(results.lines.map(line => [line.id, line]))

export interface NumberedRequirement {
  lineId: string
  /** Counted from 1 in reading order. */
  number: number
  verdict: Verdict
  subject: string
  /** Worst case, with its unit. */
  margin: string
  /** Where that is another number. */
  nominalMargin: string | null
  at: string | null
  barrier: RequirementBarrier | null
}

const words = (shown: { text: string, unit: string }) => shown.unit ? `${shown.text} ${shown.unit}` : shown.text

/** The requirements of a sheet, numbered as they are shown. */
export function numberedRequirements(results: SheetResult): NumberedRequirement[] {
  return results.lines.flatMap(line => line.requirement ? [{ id: line.id, requirement: line.requirement }] : [])
    .map(({ id, requirement }, index) => ({
      lineId: id,
      number: index + 1,
      verdict: requirement.verdict,
      subject: requirement.subject,
      margin: words(requirement.margin),
      nominalMargin: words(requirement.nominalMargin) === words(requirement.margin) ? null : words(requirement.nominalMargin),
      at: requirement.at ?? null,
      barrier: requirement.barrier ?? null,
    }))
}

export interface OpenHold { lineId: string, what: string, from: string }

/** Inputs still awaited: what (the note of the line, else its name), and from whom (its reference). */
export function openHolds(document: SheetDocument, results: SheetResult): OpenHold[] {
  const byId = resultsById(results)
  return linesInOrder(document)
    .filter(line => line.attrs.status === 'hold')
    .map((line) => {
      const result = byId.get(line.attrs.id)
      return { lineId: line.attrs.id, what: result?.note || result?.defines || lineSource(line), from: lineReference(line) }
    })
}

/** Lines that could not be computed. */
export const linesInError = (results: SheetResult): LineResult[] => results.lines.filter(line => line.status === 'error')
