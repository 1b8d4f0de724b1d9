import { idParams } from '#shared/schemas/people'
import type { ProjectDetail } from '#shared/types/api'

export default defineEventHandler(async (event): Promise<ProjectDetail> => {
  const actor = await requireActor(event)
  return projectView(actor, paramsOf(event, idParams).id)
})
