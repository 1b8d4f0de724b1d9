import { idParams } from '#shared/schemas/people'
import { reopenAnnotation } from '../../../commands/checks/threads'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await reopenAnnotation(actor, id)
  return sendNoContent(event)
})
