import { mayManagePeople } from '#shared/policies/people'
import { idParams, updatePersonSchema } from '#shared/schemas/people'
import { updatePerson } from '../../commands/people/updatePerson'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  authorise(mayManagePeople(actor))
  const { id } = paramsOf(event, idParams)
  await updatePerson(actor, id, await bodyOf(event, updatePersonSchema))
  return personView(id)
})
