import { mayManagePeople } from '#shared/policies/people'
import { invitePersonSchema } from '#shared/schemas/people'
import { invitePerson } from '../../commands/people/invitePerson'

/** Invites a person by e-mail. */
export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  authorise(mayManagePeople(actor))
  const input = await bodyOf(event, invitePersonSchema)
  const id = await invitePerson(actor, input)
  setResponseStatus(event, 201)
  return personView(id)
})
