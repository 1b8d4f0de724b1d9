import type { Actor } from '#shared/policies/actor'
import type { Recall } from '#shared/schemas/revisions'
import { voidSignatures } from '../../signing/signatures'
import { endCheck } from '../checks/asking'
import { writeToPeople } from './letters'
import { auditSubject, moveRevision, onRevision, requireVersion } from './transition'

/** Takes a submission back before it is signed as checked. It is a draft again; the signature *prepared* is void. */
export function recallRevision(actor: Actor, revisionId: string, input: Recall): Promise<void> {
  return onRevision(actor, revisionId, 'recall', async (record, transaction, effects) => {
    requireVersion(record, input.version)
    const { revision, submission } = record
    const reason = input.reason ?? null
    await moveRevision(revision, 'recall', transaction, effects, { returnedReason: null, returnedBy: null })
    if (!submission) return
    await endCheck(submission.id, 'recalled', transaction)
    await voidSignatures(submission.id, reason ? `Recalled by ${actor.name}: ${reason}` : `Recalled by ${actor.name}`, transaction)
    await writeToPeople([revision.checkerId], record, { kind: 'recalled', by: actor.name, reason }, submission.id, transaction)
    effects.audit.push({ event: 'revision_recalled', actorId: actor.id, subject: auditSubject(record), data: { submission: submission.id, reason } })
  })
}
