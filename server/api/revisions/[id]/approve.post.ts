import { mayDo } from '#shared/policies/revisions'
import { idParams } from '#shared/schemas/people'
import { approveSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { approveRevision } from '../../../commands/revisions/approveRevision'

/** A signature, so the password is asked for again; who may not sign is told so before. */
export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const record = await seenRevision(actor, id)
  authorise(mayDo('approve', actor, record.facts))
  const { password, ...input } = await bodyOf(event, approveSchema)
  await reauthenticate(event, actor, password)
  await approveRevision(actor, id, input)
  return revisionView(actor, id)
})
