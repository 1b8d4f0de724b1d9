import type { Node } from '@tiptap/pm/model'
import { DOCUMENT_BOUNDS } from './bounds'
import { canonicalText } from './canonical'
import { withUniqueIds } from './identity'
import { normalise } from './normalise'
import { sheetSchema } from './schema'
import { DocumentOutOfBounds, measureTree, rawChildren, type RawNode } from './tree'
import type { LineNode, SheetBlock, SheetDocument } from './types'

/** Why a document cannot be frozen as it is, and where. */
export interface DocumentProblem {
  /** The line or block; null for the sheet as a whole. */
  lineId: string | null
  what: string
}

export type DocumentOutcome = { ok: true, document: SheetDocument } | { ok: false, problems: DocumentProblem[] }

const KIND_NAMES: Record<string, string> = {
  paragraph: 'paragraph', heading: 'heading', bulletList: 'list', orderedList: 'list', table: 'table', figure: 'picture',
  calculation: 'calculation block', requirements: 'requirements block', response: 'response', line: 'line',
}

function idOf(node: RawNode): string | null {
  const { attrs } = node
  if (typeof attrs !== 'object' || attrs === null || !('id' in attrs)) return null
  return typeof attrs.id === 'string' && attrs.id !== '' ? attrs.id : null
}

/** Checks one block by the schema; what the schema says is for programmers, so the person is told what and where. */
function blockProblem(block: RawNode): DocumentProblem | null {
  try {
    sheetSchema.nodeFromJSON({ type: 'doc', content: [block] }).check()
    return null
  }
  catch (error) {
    const kind = KIND_NAMES[String(block.type)] ?? 'block of an unknown kind'
    const reason = error instanceof Error ? error.message : 'it does not fit'
    return { lineId: idOf(block), what: `This ${kind} holds something that a sheet cannot hold (${reason}). Remove it or type it anew.` }
  }
}

function longText(node: RawNode): boolean {
  if (typeof node.text === 'string' && node.text.length > DOCUMENT_BOUNDS.text) return true
  const attrs: unknown[] = typeof node.attrs === 'object' && node.attrs !== null ? Object.values(node.attrs) : []
  if (attrs.some(value => typeof value === 'string' && value.length > DOCUMENT_BOUNDS.text)) return true
  return rawChildren(node).some(longText)
}

/** Half a surrogate pair, as a cut through an emoji leaves it, has no canonical form. */
function halfCharacter(block: SheetBlock): boolean {
  try {
    canonicalText(block)
    return false
  }
  catch { return true }
}

function lineProblems(line: LineNode): DocumentProblem[] {
  const lineId = line.attrs.id
  return (['source', 'reference'] as const).flatMap((kind) => {
    const several = (line.content ?? []).filter(child => child.type === kind).length > 1
    const name = kind === 'source' ? 'formula' : 'reference'
    return several ? [{ lineId, what: `This line has more than one ${name}, after two people changed it at once. Keep one.` }] : []
  })
}

function blockProblems(block: SheetBlock): DocumentProblem[] {
  const tooLong = longText(block) ? [{ lineId: block.attrs.id, what: `A piece of text here is longer than ${DOCUMENT_BOUNDS.text} characters. Divide it.` }] : []
  const idTooLong = block.attrs.id.length > DOCUMENT_BOUNDS.id ? [{ lineId: null, what: 'A block has an identifier that is too long. Cut it and paste it again.' }] : []
  const half = halfCharacter(block) ? [{ lineId: block.attrs.id, what: 'A character here is cut in half. Type it anew.' }] : []
  const lines = block.type === 'calculation' || block.type === 'requirements' ? (block.content ?? []).flatMap(lineProblems) : []
  return [...tooLong, ...idTooLong, ...half, ...lines]
}

function countLines(document: SheetDocument): number {
  return document.content.reduce((sum, block) => sum + (block.type === 'calculation' || block.type === 'requirements' ? (block.content ?? []).length : 0), 0)
}

/** The schema has been checked and every attribute filled in, so the document is what its type says. */
function asSheetDocument(node: Node): SheetDocument {
  const plain = normalise(node.toJSON() as RawNode)
  return withUniqueIds(plain as unknown as SheetDocument)
}

/**
 * Reads what came from outside as a sheet: within bounds, by the schema, in normal form and with unique ids.
 * All problems are reported together, each at its place.
 */
export function validateDocument(raw: RawNode): DocumentOutcome {
  try { measureTree(raw) }
  catch (error) {
    if (error instanceof DocumentOutOfBounds) return { ok: false, problems: [{ lineId: null, what: error.message }] }
    throw error
  }
  if (raw.type !== 'doc') return { ok: false, problems: [{ lineId: null, what: 'This is not a sheet.' }] }
  const normal = normalise(raw)
  const broken = rawChildren(normal).map(blockProblem).filter(problem => problem !== null)
  if (broken.length > 0) return { ok: false, problems: broken }
  const document = asSheetDocument(sheetSchema.nodeFromJSON(normal))
  const problems = document.content.flatMap(blockProblems)
  if (countLines(document) > DOCUMENT_BOUNDS.lines) problems.push({ lineId: null, what: `This sheet has more than ${DOCUMENT_BOUNDS.lines} lines. Divide it into several sheets.` })
  return problems.length > 0 ? { ok: false, problems } : { ok: true, document }
}
