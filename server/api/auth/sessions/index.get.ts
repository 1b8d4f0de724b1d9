import { listDevices } from '../../../commands/people/devices'

/** The devices on which this person is signed in, the last used first. */
export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  return listDevices(actor)
})
