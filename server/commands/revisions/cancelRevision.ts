import type { Actor } from '#shared/policies/actor'
import { auditSubject, moveRevision, onRevision, requireVersion } from './transition'

/** Gives up a draft that was never issued. Its label is not used again. */
export function cancelRevision(actor: Actor, revisionId: string, input: { version: number }): Promise<void> {
  return onRevision(actor, revisionId, 'cancel', async (record, transaction, effects) => {
    requireVersion(record, input.version)
    await moveRevision(record.revision, 'cancel', transaction, effects)
    effects.audit.push({ event: 'revision_cancelled', actorId: actor.id, subject: auditSubject(record), data: {} })
  })
}
