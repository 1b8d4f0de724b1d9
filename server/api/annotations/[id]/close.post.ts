import { idParams } from '#shared/schemas/people'
import { closeAnnotation } from '../../../commands/checks/threads'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await closeAnnotation(actor, id)
  return sendNoContent(event)
})
