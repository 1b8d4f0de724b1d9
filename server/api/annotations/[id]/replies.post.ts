import { idParams } from '#shared/schemas/people'
import { replySchema } from '#shared/schemas/revisions'
import { replyTo, requireThread } from '../../../commands/checks/threads'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await requireThread(actor, id)
  const { text } = await bodyOf(event, replySchema)
  await replyTo(actor, id, text)
  return sendNoContent(event)
})
