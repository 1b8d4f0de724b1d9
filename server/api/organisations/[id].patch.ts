import { mayManagePeople } from '#shared/policies/people'
import { idParams, organisationSchema } from '#shared/schemas/people'
import { renameOrganisation } from '../../commands/people/organisations'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  authorise(mayManagePeople(actor))
  const { id } = paramsOf(event, idParams)
  const { name } = await bodyOf(event, organisationSchema)
  await renameOrganisation(actor, id, name)
  return clientView(id)
})
