import { mayDo } from '#shared/policies/revisions'
import { idParams } from '#shared/schemas/people'
import type { SubmitReview } from '#shared/types/api'
import { reviewSubmission } from '../../../commands/revisions/reviewSubmission'

/** What stands between the draft and its submission, computed as it would be frozen. */
export default defineEventHandler(async (event): Promise<SubmitReview> => {
  const actor = await requireActor(event)
  const record = await seenRevision(actor, paramsOf(event, idParams).id)
  authorise(mayDo('submit', actor, record.facts))
  return reviewSubmission(actor, record)
})
