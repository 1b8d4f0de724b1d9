import { mayManagePeople } from '#shared/policies/people'
import { organisationSchema } from '#shared/schemas/people'
import { createOrganisation } from '../../commands/people/organisations'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  authorise(mayManagePeople(actor))
  const { name } = await bodyOf(event, organisationSchema)
  const id = await createOrganisation(actor, name)
  setResponseStatus(event, 201)
  return clientView(id)
})
