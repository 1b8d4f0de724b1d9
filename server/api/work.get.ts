import { workList } from '#shared/policies/lists'
import type { RegisterRow } from '#shared/types/api'

/** What this person writes, has had returned, or has with others. */
export default defineEventHandler(async (event): Promise<RegisterRow[]> => {
  const actor = await requireActor(event)
  authorise(workList(actor))
  return registerRows({ kind: 'writer', userId: actor.id }, { sort: 'since' })
})
