import { tickParams } from '#shared/schemas/revisions'
import { tickLine } from '../../../../commands/checks/ticks'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id, lineId } = paramsOf(event, tickParams)
  await tickLine(actor, id, lineId)
  return sendNoContent(event)
})
