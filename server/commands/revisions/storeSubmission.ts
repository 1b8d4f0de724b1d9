import type { Transaction } from 'sequelize'
import { inputNotes } from '#shared/document/lines'
import { DOCUMENT_FORMAT } from '#shared/document/types'
import type { LineResult, Shown } from '#shared/engine/types'
import type { Actor } from '#shared/policies/actor'
import type { GivenAcceptance } from '#shared/document/findings'
import { Acceptance, Engine, SheetValue, Submission, SubmissionHold, SubmissionLine } from '../../database'
import type { RevisionRecord } from '../../database/queries/revisionRecord'
import { newId } from '../../utils/ids'
import type { DraftContent, FrozenContent } from './draftContent'

export interface NewSubmission {
  actor: Actor
  record: RevisionRecord
  draft: DraftContent
  content: FrozenContent
  acceptances: readonly GivenAcceptance[]
}

const words = ({ text, unit }: Shown) => (unit ? `${text} ${unit}` : text).slice(0, 200)

function shownOf({ value }: LineResult): string | null {
  return value && 'shown' in value ? words(value.shown) : null
}

/** What is searched for and listed later, out of the frozen content. */
async function storeRows(submissionId: string, { document, computed }: FrozenContent, transaction: Transaction): Promise<void> {
  await SubmissionLine.bulkCreate(computed.rows.map(row => ({ submissionId, lineId: row.lineId, hash: row.hash, ord: row.order, kind: row.kind })), { transaction })
  await SubmissionHold.bulkCreate(inputNotes(document).map(note => ({
    submissionId, lineId: note.lineId, kind: note.status, subject: note.subject.slice(0, 2000), reference: note.reference.slice(0, 2000),
  })), { transaction })
  const values = computed.results.lines.flatMap((line) => {
    const shown = shownOf(line)
    return line.defines && shown !== null ? [{ submissionId, lineId: line.id, name: line.defines.slice(0, 120), shown }] : []
  })
  await SheetValue.bulkCreate(values, { transaction })
}

/** Stores what is frozen, never to be changed. The caller holds the locks of the revision and of its document. */
export async function storeSubmission({ actor, record, draft, content, acceptances }: NewSubmission, transaction: Transaction): Promise<Submission> {
  const { revision, sheet } = record
  const { computed } = content
  await Engine.findOrCreate({ where: { hash: computed.engineHash }, defaults: { hash: computed.engineHash, version: computed.engineVersion }, transaction })
  const ordinal = await Submission.count({ where: { revisionId: revision.id }, transaction }) + 1
  const submission = await Submission.create({
    id: newId(), revisionId: revision.id, ordinal, format: DOCUMENT_FORMAT,
    contentJson: content.contentJson, contentHash: content.contentHash,
    recordedJson: computed.recordedJson, resultsHash: content.resultsHash,
    shownJson: JSON.stringify(computed.results), cautionsJson: JSON.stringify(computed.cautions),
    titleBlock: { number: sheet.number, title: sheet.title, settings: sheet.settings },
    engineVersion: computed.engineVersion, engineHash: computed.engineHash,
    submittedBy: actor.id, seq: draft.seq, stateVector: Buffer.from(draft.stateVector),
  }, { transaction })
  await storeRows(submission.id, content, transaction)
  await Acceptance.bulkCreate(acceptances.map(one => ({ id: newId(), submissionId: submission.id, ...one, byId: actor.id })), { transaction })
  return submission
}
