import { idParams } from '#shared/schemas/people'
import { reviseSchema } from '#shared/schemas/revisions'
import { reviseSheet } from '../../../commands/revisions/reviseSheet'

export default defineEventHandler(async (event): Promise<{ revisionId: string }> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenRevision(actor, id)
  const revisionId = await reviseSheet(actor, id, await bodyOf(event, reviseSchema))
  setResponseStatus(event, 201)
  return { revisionId }
})
