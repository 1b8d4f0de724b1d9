import { idParams } from '#shared/schemas/people'
import { candidatesQuerySchema } from '#shared/schemas/sheets'
import type { PersonRef } from '#shared/types/api'
import { checkerCandidates } from '../../../utils/candidates'

/** Who can be asked to check: the project's checkers; with `revision` only those who had no hand in it. */
export default defineEventHandler(async (event): Promise<{ checkers: PersonRef[] }> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const { revision } = queryOf(event, candidatesQuerySchema)
  const project = await seenProject(actor, id)
  return { checkers: await checkerCandidates(actor, project, revision) }
})
