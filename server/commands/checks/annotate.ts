import type { Actor } from '#shared/policies/actor'
import type { Annotate } from '#shared/schemas/revisions'
import { idsInOrder } from '#shared/document/identity'
import { Annotation } from '../../database'
import { badInput, conflict } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { auditSubject, onRevision } from '../revisions/transition'
import { frozenDocument } from '../sheets/startRevision'
import { relativePositions } from '../../database/queries/anchors'

/** The checker's annotation on a line, a piece of its text, or the sheet. Numbered through the revision. Returns its id. */
export function annotate(actor: Actor, revisionId: string, input: Annotate): Promise<string> {
  return onRevision(actor, revisionId, 'annotate', async (record, transaction, effects) => {
    const { submission } = record
    if (!submission) throw conflict('wrong_state', 'There is no submission of it at present.')
    const document = await frozenDocument(revisionId, transaction)
    if (input.blockId !== null && !(document && idsInOrder(document).includes(input.blockId))) throw badInput('blockId', 'There is no such line in what was submitted.')
    const last = await Annotation.max<number | null, Annotation>('number', { where: { revisionId }, transaction })
    const number = (last ?? 0) + 1
    const annotation = await Annotation.create({
      id: newId(), revisionId, submissionId: submission.id, number, kind: input.kind, byId: actor.id, text: input.text,
      blockId: input.blockId, quote: input.quote, fromPos: input.from, toPos: input.to,
      ...await relativePositions(revisionId, input),
    }, { transaction })
    effects.changed(revisionId, 'check')
    effects.audit.push({ event: 'annotation_raised', actorId: actor.id, subject: auditSubject(record), data: { annotation: annotation.id, number, kind: input.kind } })
    return annotation.id
  })
}
