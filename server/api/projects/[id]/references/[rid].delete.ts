import { referenceParams } from '#shared/schemas/projects'
import { removeReference } from '../../../../commands/projects/references'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id, rid } = paramsOf(event, referenceParams)
  await removeReference(actor, id, rid)
  return sendNoContent(event)
})
