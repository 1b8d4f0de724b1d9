import { idParams } from '#shared/schemas/people'
import { renameSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { renameRevision } from '../../../commands/revisions/renameRevision'

/** Title, number or settings of a draft's sheet. */
export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenRevision(actor, id)
  await renameRevision(actor, id, await bodyOf(event, renameSchema))
  return revisionView(actor, id)
})
