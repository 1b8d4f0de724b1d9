import { idParams } from '#shared/schemas/people'
import { createSheetSchema } from '#shared/schemas/sheets'
import { createSheet, type CreatedSheet } from '../../../commands/sheets/createSheet'

export default defineEventHandler(async (event): Promise<CreatedSheet> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenProject(actor, id)
  const created = await createSheet(actor, id, await bodyOf(event, createSheetSchema))
  setResponseStatus(event, 201)
  return created
})
