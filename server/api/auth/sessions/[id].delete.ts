import { idParams } from '#shared/schemas/people'
import { endDevice } from '../../../commands/people/devices'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await endDevice(actor, id)
  setResponseStatus(event, 204)
})
