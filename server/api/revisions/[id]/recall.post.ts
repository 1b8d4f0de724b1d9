import { idParams } from '#shared/schemas/people'
import { recallSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { recallRevision } from '../../../commands/revisions/recallRevision'

export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenRevision(actor, id)
  await recallRevision(actor, id, await bodyOf(event, recallSchema))
  return revisionView(actor, id)
})
