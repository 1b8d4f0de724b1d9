import { checkList } from '#shared/policies/lists'
import type { RegisterRow } from '#shared/types/api'

/** What this person is asked to check, the most pressing first. */
export default defineEventHandler(async (event): Promise<RegisterRow[]> => {
  const actor = await requireActor(event)
  authorise(checkList(actor))
  return registerRows({ kind: 'checker', userId: actor.id }, { sort: 'due' })
})
