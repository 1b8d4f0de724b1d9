import { workInProject } from '#shared/policies/projects'
import { idParams } from '#shared/schemas/people'
import { addAttachment } from '../../../commands/attachments/addAttachment'
import { factsOfProject } from '../../../presenters/projects'

/** A picture as a form with one file. Who may not is told so before the body is read. */
export default defineEventHandler(async (event): Promise<{ id: string }> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  authorise(workInProject(actor, factsOfProject(await seenProject(actor, id))))
  const parts = await readMultipartFormData(event).catch(() => undefined)
  const file = parts?.find(part => part.filename !== undefined)
  if (!file) throw badInput('file', 'Choose a picture to send.')
  const attachmentId = await addAttachment(actor, id, { name: file.filename ?? '', bytes: file.data })
  setResponseStatus(event, 201)
  return { id: attachmentId }
})
