import { idParams } from '#shared/schemas/people'
import type { SubmissionView } from '#shared/types/api'

export default defineEventHandler(async (event): Promise<SubmissionView> => {
  const actor = await requireActor(event)
  return submissionView(actor, paramsOf(event, idParams).id)
})
