import type { Actor } from '#shared/policies/actor'
import type { Reassign } from '#shared/schemas/revisions'
import { conflict } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { askChecker, endCheck, requireChecker } from '../checks/asking'
import { carryTicks } from '../checks/carryTicks'
import { writeTo, writeToPeople } from './letters'
import { auditSubject, onRevision, requireVersion } from './transition'
import { now } from '../../utils/clock'

/** A manager names another checker, or another due date. Ticks are personal: the new checker starts without. */
export function reassignChecker(actor: Actor, revisionId: string, input: Reassign): Promise<void> {
  return onRevision(actor, revisionId, 'reassign', async (record, transaction, effects) => {
    requireVersion(record, input.version)
    const { revision, submission } = record
    if (!submission) throw conflict('wrong_state', 'There is no submission of it at present.')
    const checker = await requireChecker(record, input.checkerId, submission.submittedBy, transaction)
    const former = revision.checkerId ?? ''
    const cause = newId()
    await endCheck(submission.id, 'reassigned', transaction)
    await askChecker({ submissionId: submission.id, checkerId: checker.id, askedBy: actor.id, dueDate: input.due }, transaction)
    await revision.update({ checkerId: checker.id, dueDate: input.due, version: revision.version + 1, updatedAt: now() }, { transaction })
    await carryTicks(record, submission.id, checker.id, transaction)
    await writeTo(checker, record, { kind: 'checker_asked', by: actor.name, due: input.due }, cause, transaction)
    if (former !== checker.id) await writeToPeople([former], record, { kind: 'recalled', by: actor.name, reason: `${checker.name} checks it instead.` }, cause, transaction)
    effects.changed(revisionId, 'state')
    effects.audit.push({ event: 'checker_reassigned', actorId: actor.id, subject: auditSubject(record), data: { submission: submission.id, from: former, to: checker.id, due: input.due } })
  })
}
