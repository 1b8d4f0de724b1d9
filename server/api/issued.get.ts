import { issuedList } from '#shared/policies/lists'
import type { RegisterRow } from '#shared/types/api'

/** What was issued to this person's organisation. */
export default defineEventHandler(async (event): Promise<RegisterRow[]> => {
  const actor = await requireActor(event)
  authorise(issuedList(actor))
  return registerRows({ kind: 'client', organisationId: actor.organisationId ?? '' }, { sort: '-since' })
})
