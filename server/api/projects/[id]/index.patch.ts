import { idParams } from '#shared/schemas/people'
import { updateProjectSchema } from '#shared/schemas/projects'
import type { ProjectDetail } from '#shared/types/api'
import { updateProject } from '../../../commands/projects/updateProject'

export default defineEventHandler(async (event): Promise<ProjectDetail> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenProject(actor, id)
  await updateProject(actor, id, await bodyOf(event, updateProjectSchema))
  return projectView(actor, id)
})
