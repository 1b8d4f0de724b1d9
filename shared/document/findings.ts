import type { LineResult, SheetResult } from '../engine/types'
import type { SubmitFinding } from '../types/api'
import { linesOf, tickableRows, type SheetLine } from './lines'
import type { SheetDocument } from './types'

/** What stands between a sheet and its submission, in reading order within each kind. Pure. */

export interface FindingInput {
  document: SheetDocument
  results: SheetResult
  cautions: readonly { message: string, lineId: string | null }[]
  responseProblems: readonly { blockId: string, message: string }[]
  /** Pictures that are in the sheet and not in the project. */
  missingPictures: readonly string[]
}

const finding = (kind: SubmitFinding['kind'], lineId: string | null, what: string, mustMend = false): SubmitFinding =>
  ({ kind, lineId, what: what.slice(0, 2000), mustMend })

function errorsOf(result: LineResult): SubmitFinding[] {
  return result.problems.filter(problem => problem.severity === 'error').map(problem => finding('error', result.id, problem.message))
}

function requirementOf(result: LineResult): SubmitFinding[] {
  const { requirement } = result
  if (!requirement || requirement.verdict === 'met') return []
  const { text, unit } = requirement.margin
  return [finding('requirement', result.id, `${requirement.subject}: ${requirement.verdict}, margin ${text}${unit ? ` ${unit}` : ''}.`)]
}

const WANTED: Record<NonNullable<SheetLine['status']>, string> = {
  given: 'This given input does not say by which document.',
  assumed: 'This assumption does not say why.',
  hold: 'This hold does not say from whom it is awaited.',
}

function referenceOf(line: SheetLine, result: LineResult | undefined): SubmitFinding[] {
  if (line.reference !== '' || line.source === '') return []
  if (line.status !== null) return [finding('reference', line.id, WANTED[line.status])]
  return result?.kind === 'requirement' ? [finding('reference', line.id, 'This requirement does not say where it comes from.')] : []
}

function structure({ document, missingPictures }: FindingInput): SubmitFinding[] {
  const empty = tickableRows(document).length === 0 ? [finding('error', null, 'There is nothing on this sheet to check.', true)] : []
  const pictures = document.content.filter(block => block.type === 'figure' && missingPictures.includes(block.attrs.attachment))
    .map(block => finding('error', block.attrs.id, 'This picture is not in the project. Insert it again.', true))
  return [...empty, ...pictures]
}

export function submitFindings(input: FindingInput): SubmitFinding[] {
  const { document, results, cautions, responseProblems } = input
  const byId = new Map(results.lines.map(line => [line.id, line]))
  const lines = linesOf(document)
  return [
    ...structure(input),
    ...results.lines.flatMap(errorsOf),
    ...responseProblems.map(problem => finding('error', problem.blockId, problem.message)),
    ...results.lines.flatMap(requirementOf),
    ...lines.flatMap(line => referenceOf(line, byId.get(line.id))),
    ...lines.filter(line => line.status === 'hold' && line.source !== '').map(line => finding('hold', line.id, `Hold: ${line.source}${line.reference ? ` (${line.reference})` : ''}`)),
    ...cautions.map(caution => finding('caution', caution.lineId, caution.message)),
  ]
}

/** Whether a finding stops the submission until it is mended or accepted with a reason. */
export const needsAnswer = (one: SubmitFinding): boolean => one.mustMend || one.kind === 'error' || one.kind === 'requirement' || one.kind === 'reference'

export interface GivenAcceptance { lineId: string | null, what: string, reason: string }

/** The findings that neither were mended nor are accepted. */
export const unanswered = (findings: readonly SubmitFinding[], accepted: readonly GivenAcceptance[]): SubmitFinding[] =>
  findings.filter(one => needsAnswer(one) && (one.mustMend || !accepted.some(given => given.lineId === one.lineId && given.what === one.what)))
