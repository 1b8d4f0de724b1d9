import { idParams } from '#shared/schemas/people'
import type { CheckView } from '../../../utils/records'

export default defineEventHandler(async (event): Promise<CheckView> => {
  const actor = await requireActor(event)
  return checkView(actor, paramsOf(event, idParams).id)
})
