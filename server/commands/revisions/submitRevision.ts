import type { Transaction } from 'sequelize'
import { unanswered } from '#shared/document/findings'
import { mayDo, see } from '#shared/policies/revisions'
import type { Actor } from '#shared/policies/actor'
import type { Submit } from '#shared/schemas/revisions'
import { preparedStatement } from '#shared/workflow/statements'
import { RevisionDoc, type Submission } from '../../database'
import { recentEditors } from '../../database/queries/editors'
import { findRevisionRecord, type RevisionRecord } from '../../database/queries/revisionRecord'
import { writeSignature } from '../../signing/signatures'
import { authorise, authoriseSight } from '../../utils/authorise'
import { conflict, notFound } from '../../utils/errors'
import type { Effects } from '../run'
import { askChecker, requireChecker } from '../checks/asking'
import { carryTicks } from '../checks/carryTicks'
import { draftContent, type DraftContent, type FrozenContent } from './draftContent'
import { writeTo } from './letters'
import { draftOf } from './reviewSubmission'
import { storeSubmission } from './storeSubmission'
import { auditSubject, moveRevision, onRevision, requireVersion } from './transition'

type SubmitInput = Omit<Submit, 'password'>
interface Frozen { draft: DraftContent, content: FrozenContent }

const EDITED_MINUTES = 60

async function editedMeanwhile(revisionId: string, afterSeq?: number) {
  const editors = await recentEditors(revisionId, { minutes: EDITED_MINUTES, afterSeq })
  const names = editors.map(editor => editor.name).join(', ')
  return conflict('edited_meanwhile', `${names || 'Someone'} edited the sheet meanwhile, so it is not what you had on the screen. Look at it again and submit it then.`, { editors })
}

/** Reads, validates, computes and hashes the draft outside any lock; refuses what is not what was on the screen or not answered. */
async function freezeDraft(actor: Actor, revisionId: string, input: SubmitInput): Promise<Frozen> {
  const record = await findRevisionRecord(revisionId)
  if (!record) throw notFound()
  authoriseSight(see(actor, record.facts))
  authorise(mayDo('submit', actor, record.facts))
  requireVersion(record, input.version)
  const draft = await draftContent(draftOf(record))
  const { content, findings } = draft
  const open = unanswered(findings, input.acceptances)
  if (content && content.contentHash !== input.hash) throw await editedMeanwhile(revisionId)
  if (!content || open.length > 0) throw conflict('not_ready', 'Something in the sheet has to be mended, or accepted with a reason, before it can be submitted.', { findings: open })
  return { draft, content }
}

/** Still the same draft? Locks the document's row, so that from here to COMMIT nobody can append. */
async function closeDocument({ revision }: RevisionRecord, draft: DraftContent, transaction: Transaction): Promise<void> {
  const doc = await RevisionDoc.findByPk(revision.id, { transaction, lock: transaction.LOCK.UPDATE, rejectOnEmpty: true })
  if (doc.epoch !== draft.epoch || doc.nextSeq !== draft.seq + 1) throw await editedMeanwhile(revision.id, draft.seq)
  await doc.update({ epoch: doc.epoch + 1 }, { transaction })
}

async function signPrepared(actor: Actor, record: RevisionRecord, submission: Submission, transaction: Transaction): Promise<string> {
  const statement = preparedStatement({ number: record.sheet.number, revision: record.revision.label })
  const signature = await writeSignature({ actor, revisionId: record.revision.id, sheetId: record.sheet.id, submission, meaning: 'prepared', statement }, transaction)
  return signature.id
}

async function submitFrozen(actor: Actor, record: RevisionRecord, { draft, content }: Frozen, input: SubmitInput, transaction: Transaction, effects: Effects): Promise<void> {
  const { revision } = record
  requireVersion(record, input.version)
  const checker = await requireChecker(record, input.checkerId, actor.id, transaction)
  await closeDocument(record, draft, transaction)
  const submission = await storeSubmission({ actor, record, draft, content, acceptances: input.acceptances }, transaction)
  await askChecker({ submissionId: submission.id, checkerId: checker.id, askedBy: actor.id, dueDate: input.due }, transaction)
  await carryTicks(record, submission.id, checker.id, transaction)
  const signature = await signPrepared(actor, record, submission, transaction)
  await moveRevision(revision, 'submit', transaction, effects, { checkerId: checker.id, dueDate: input.due, returnedReason: null, returnedBy: null })
  await writeTo(checker, record, { kind: 'checker_asked', by: actor.name, due: input.due }, submission.id, transaction)
  effects.audit.push({
    event: 'revision_submitted', actorId: actor.id, subject: auditSubject(record),
    data: {
      submission: submission.id, signature, hash: content.contentHash, resultsHash: content.resultsHash, engineHash: content.computed.engineHash,
      checkerId: checker.id, due: input.due, acceptances: input.acceptances.length,
    },
  })
}

/** Freezes a draft, signs it as prepared and asks the checker. The caller has asked for the password again. */
export async function submitRevision(actor: Actor, revisionId: string, input: SubmitInput): Promise<void> {
  const frozen = await freezeDraft(actor, revisionId, input)
  await onRevision(actor, revisionId, 'submit', (record, transaction, effects) => submitFrozen(actor, record, frozen, input, transaction, effects))
}
