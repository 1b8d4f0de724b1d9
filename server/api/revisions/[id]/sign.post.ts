import { mayDo } from '#shared/policies/revisions'
import { idParams } from '#shared/schemas/people'
import { signSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { signRevision } from '../../../commands/revisions/signRevision'

/** A signature, so the password is asked for again; who may not sign is told so before. */
export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const record = await seenRevision(actor, id)
  authorise(mayDo('sign', actor, record.facts))
  const { password, ...input } = await bodyOf(event, signSchema)
  await reauthenticate(event, actor, password)
  await signRevision(actor, id, input)
  return revisionView(actor, id)
})
