import { idParams } from '#shared/schemas/people'
import { annotationSchema } from '#shared/schemas/revisions'
import { annotate } from '../../../commands/checks/annotate'

export default defineEventHandler(async (event): Promise<{ id: string }> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenRevision(actor, id)
  const annotationId = await annotate(actor, id, await bodyOf(event, annotationSchema))
  setResponseStatus(event, 201)
  return { id: annotationId }
})
