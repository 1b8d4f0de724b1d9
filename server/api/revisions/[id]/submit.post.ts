import { mayDo } from '#shared/policies/revisions'
import { idParams } from '#shared/schemas/people'
import { submitSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { submitRevision } from '../../../commands/revisions/submitRevision'

/** A signature, so the password is asked for again; who may not sign is told so before. */
export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const record = await seenRevision(actor, id)
  authorise(mayDo('submit', actor, record.facts))
  const { password, ...input } = await bodyOf(event, submitSchema)
  await reauthenticate(event, actor, password)
  await submitRevision(actor, id, input)
  return revisionView(actor, id)
})
