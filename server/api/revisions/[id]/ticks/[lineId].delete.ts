import { tickParams } from '#shared/schemas/revisions'
import { untickLine } from '../../../../commands/checks/ticks'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id, lineId } = paramsOf(event, tickParams)
  await untickLine(actor, id, lineId)
  return sendNoContent(event)
})
