import { Issue, Transmittal } from '../../database'
import type { Actor } from '#shared/policies/actor'
import type { Withdraw } from '#shared/schemas/revisions'
import { findPerson } from '../../database/queries/people'
import { writeTo } from './letters'
import { auditSubject, moveRevision, onRevision, requireVersion } from './transition'

/** Takes an issued or superseded revision out of use and tells everyone it was sent to. It revives no predecessor. */
export function withdrawRevision(actor: Actor, revisionId: string, input: Omit<Withdraw, 'password'>): Promise<void> {
  return onRevision(actor, revisionId, 'withdraw', async (record, transaction, effects) => {
    requireVersion(record, input.version)
    await moveRevision(record.revision, 'withdraw', transaction, effects, { returnedReason: input.reason, returnedBy: actor.id })
    const issues = await Issue.findAll({ where: { revisionId }, transaction })
    const sent = await Transmittal.findAll({ where: { issueId: issues.map(issue => issue.id) }, transaction })
    for (const { userId, email } of sent) {
      const person = await findPerson(userId, transaction)
      if (person) await writeTo({ ...person, email }, record, { kind: 'withdrawn', by: actor.name, reason: input.reason }, revisionId, transaction, 'issued')
    }
    effects.audit.push({ event: 'revision_withdrawn', actorId: actor.id, subject: auditSubject(record), data: { reason: input.reason } })
  })
}
