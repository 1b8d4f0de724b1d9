import { idParams } from '#shared/schemas/people'
import type { RevisionView } from '#shared/types/api'

export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  return revisionView(actor, paramsOf(event, idParams).id)
})
