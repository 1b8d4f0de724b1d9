import { mayManagePeople } from '#shared/policies/people'

/** The firm's clients. */
export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  authorise(mayManagePeople(actor))
  return clientViews()
})
