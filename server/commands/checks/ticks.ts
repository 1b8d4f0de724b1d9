import type { Actor } from '#shared/policies/actor'
import { SubmissionLine, Tick } from '../../database'
import { conflict, notFound } from '../../utils/errors'
import { onRevision } from '../revisions/transition'

/** The checker's mark on a line of the present submission. Ticking twice is one tick. */
export function tickLine(actor: Actor, revisionId: string, lineId: string): Promise<void> {
  return onRevision(actor, revisionId, 'tick', async ({ submission }, transaction, effects) => {
    if (!submission) throw conflict('wrong_state', 'There is no submission of it at present.')
    const line = await SubmissionLine.findOne({ where: { submissionId: submission.id, lineId }, transaction })
    if (!line) throw notFound('There is no such line in what was submitted.')
    const mark = { submissionId: submission.id, lineId, checkerId: actor.id }
    await Tick.findOrCreate({ where: mark, defaults: { ...mark, lineHash: line.hash }, transaction })
    effects.changed(revisionId, 'check')
  })
}

/** Takes the mark away; without one nothing happens. */
export function untickLine(actor: Actor, revisionId: string, lineId: string): Promise<void> {
  return onRevision(actor, revisionId, 'tick', async ({ submission }, transaction, effects) => {
    if (!submission) throw conflict('wrong_state', 'There is no submission of it at present.')
    await Tick.destroy({ where: { submissionId: submission.id, lineId, checkerId: actor.id }, transaction })
    effects.changed(revisionId, 'check')
  })
}
