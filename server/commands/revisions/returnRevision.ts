import type { Actor } from '#shared/policies/actor'
import type { Return } from '#shared/schemas/revisions'
import { voidSignatures } from '../../signing/signatures'
import { endCheck } from '../checks/asking'
import { writeToPeople } from './letters'
import { auditSubject, moveRevision, onRevision, requireSubmission, requireVersion } from './transition'

/** The checker of a submission, or the approver of a checked one, gives it back with a reason. Signatures given on it are void. */
export function returnRevision(actor: Actor, revisionId: string, input: Return): Promise<void> {
  return onRevision(actor, revisionId, 'return', async (record, transaction, effects) => {
    requireVersion(record, input.version)
    const submission = requireSubmission(record, input.submissionHash)
    const { revision } = record
    const from = revision.state
    await moveRevision(revision, 'return', transaction, effects, { returnedReason: input.reason, returnedBy: actor.id })
    await endCheck(submission.id, 'returned', transaction)
    await voidSignatures(submission.id, `Returned by ${actor.name}: ${input.reason}`, transaction)
    const told = [submission.submittedBy, revision.authorId, from === 'checked' ? revision.checkerId : null]
    await writeToPeople(told, record, { kind: 'returned', by: actor.name, reason: input.reason }, submission.id, transaction)
    effects.audit.push({ event: 'revision_returned', actorId: actor.id, subject: auditSubject(record), data: { submission: submission.id, reason: input.reason, from } })
  })
}
