/** What the head of a sheet says: requirements by number, holds, lines in error. Pure. */
import type { LineResult, RequirementBarrier, SheetResult, Verdict } from '../engine/types'
import { holds } from './lines'
import type { LineNode, LinesBlock, SheetBlock, SheetDocument } from './types'

export const isLinesBlock = (block: SheetBlock): block is LinesBlock => block.type === 'calculation' || block.type === 'requirements'

/** What was typed in a line; two sources, as a merge may leave them, are both read. */
export const lineSource = (line: LineNode): string => (line.content ?? []).filter(child => child.type === 'source')
  .map(child => (child.content ?? []).map(text => text.text).join('')).join(' ').trim()

export const resultsById = (results: SheetResult): Map<string, LineResult> => new Map(results.lines.map(line => [line.id, line]))

export interface NumberedRequirement {
  lineId: string
  /** Counted from 1 in reading order. */
  number: number
  verdict: Verdict
  subject: string
  /** Worst case, with its unit. */
  margin: string
  /** Null where it is the same as the worst case. */
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
  return holds(document).map(({ lineId, subject, reference }) => {
    const result = byId.get(lineId)
    return { lineId, what: result?.note || result?.defines || subject, from: reference }
  })
}

/** Lines that could not be computed. */
export const linesInError = (results: SheetResult): LineResult[] => results.lines.filter(line => line.status === 'error')
