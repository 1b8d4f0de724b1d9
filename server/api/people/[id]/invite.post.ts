import { mayManagePeople } from '#shared/policies/people'
import { idParams } from '#shared/schemas/people'
import { inviteAgain } from '../../../commands/people/invitePerson'

/** Sends the invitation anew; the earlier link stops working. */
export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  authorise(mayManagePeople(actor))
  const { id } = paramsOf(event, idParams)
  await inviteAgain(actor, id)
  setResponseStatus(event, 204)
})
