/** A draft as it would be frozen: read from the log, validated, computed, hashed. Outside any lock. */
import * as Y from 'yjs'
import { canonicalText, sha256Hex, sheetContent } from '#shared/document/canonical'
import { submitFindings } from '#shared/document/findings'
import { attachmentIds } from '#shared/document/lines'
import { DocumentOutOfBounds, readDocument } from '#shared/document/tree'
import { validateDocument, type DocumentOutcome } from '#shared/document/validate'
import type { SheetDocument } from '#shared/document/types'
import type { SheetSettings, SubmitFinding } from '#shared/types/api'
import { ComputationOverrun, computeSheet, type RecordedComputation } from '../../calc'
import { createSheetLog } from '../../collab/log'
import { Attachment, sequelize } from '../../database'
import { notFound } from '../../utils/errors'

export interface FrozenContent {
  document: SheetDocument
  contentJson: string
  contentHash: string
  resultsHash: string
  computed: RecordedComputation
}

export interface DraftContent {
  epoch: number
  /** Number of the last update in it. */
  seq: number
  stateVector: Uint8Array
  findings: SubmitFinding[]
  /** Null while something must be mended first. */
  content: FrozenContent | null
}

export interface DraftOf { revisionId: string, projectId: string, settings: SheetSettings }

function readLog(ydoc: Y.Doc): DocumentOutcome {
  try { return validateDocument(readDocument(ydoc)) }
  catch (error) {
    const what = error instanceof DocumentOutOfBounds ? error.message : 'The sheet holds something that cannot be read. Restore an earlier state of it.'
    return { ok: false, problems: [{ lineId: null, what }] }
  }
}

async function missingPictures(document: SheetDocument, projectId: string): Promise<string[]> {
  const wanted = attachmentIds(document)
  if (wanted.length === 0) return []
  const present = await Attachment.findAll({ attributes: ['id'], where: { id: wanted, projectId } })
  const known = new Set(present.map(one => one.id))
  return wanted.filter(id => !known.has(id))
}

const mend = (lineId: string | null, what: string): SubmitFinding => ({ kind: 'error', lineId, what, mustMend: true })

async function freeze(document: SheetDocument, of: DraftOf): Promise<Pick<DraftContent, 'findings' | 'content'>> {
  const { significantDigits } = of.settings
  try {
    const computed = await computeSheet(document, { significantDigits })
    const findings = submitFindings({ document, ...computed, missingPictures: await missingPictures(document, of.projectId) })
    if (findings.some(one => one.mustMend)) return { findings, content: null }
    const contentJson = canonicalText(sheetContent(document, { significantDigits }))
    return { findings, content: { document, contentJson, contentHash: sha256Hex(contentJson), resultsHash: sha256Hex(computed.recordedJson), computed } }
  }
  catch (error) {
    if (error instanceof ComputationOverrun) return { findings: [mend(null, `${error.message} Divide it, or make its lists and searches smaller.`)], content: null }
    throw error
  }
}

export async function draftContent(of: DraftOf): Promise<DraftContent> {
  const loaded = await createSheetLog(sequelize).load(of.revisionId)
  if (!loaded) throw notFound()
  const ydoc = new Y.Doc()
  try {
    Y.applyUpdate(ydoc, loaded.update)
    const head = { epoch: loaded.epoch, seq: loaded.nextSeq - 1, stateVector: Y.encodeStateVector(ydoc) }
    const outcome = readLog(ydoc)
    if (!outcome.ok) return { ...head, findings: outcome.problems.map(problem => mend(problem.lineId, problem.what)), content: null }
    return { ...head, ...await freeze(outcome.document, of) }
  }
  finally { ydoc.destroy() }
}
