import { mayManagePeople } from '#shared/policies/people'
import { User } from '../../database'
import { presentPerson } from '../../presenters/people'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  authorise(mayManagePeople(actor))
  const users = await User.findAll({ include: withBelonging, order: [['name', 'ASC'], ['id', 'ASC']] })
  return users.map(presentPerson)
})
