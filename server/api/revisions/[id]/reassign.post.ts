import { idParams } from '#shared/schemas/people'
import { reassignSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { reassignChecker } from '../../../commands/revisions/reassignChecker'

export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenRevision(actor, id)
  await reassignChecker(actor, id, await bodyOf(event, reassignSchema))
  return revisionView(actor, id)
})
