import { idParams } from '#shared/schemas/people'
import { returnSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { returnRevision } from '../../../commands/revisions/returnRevision'

export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenRevision(actor, id)
  await returnRevision(actor, id, await bodyOf(event, returnSchema))
  return revisionView(actor, id)
})
