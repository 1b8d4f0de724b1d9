import { idParams } from '#shared/schemas/people'
import { cancelSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { cancelRevision } from '../../../commands/revisions/cancelRevision'

export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenRevision(actor, id)
  await cancelRevision(actor, id, await bodyOf(event, cancelSchema))
  return revisionView(actor, id)
})
