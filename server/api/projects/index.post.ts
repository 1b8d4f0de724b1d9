import { createProjectSchema } from '#shared/schemas/projects'
import { createProject as mayCreate } from '#shared/policies/projects'
import type { ProjectDetail } from '#shared/types/api'
import { createProject } from '../../commands/projects/createProject'

export default defineEventHandler(async (event): Promise<ProjectDetail> => {
  const actor = await requireActor(event)
  authorise(mayCreate(actor))
  const id = await createProject(actor, await bodyOf(event, createProjectSchema))
  setResponseStatus(event, 201)
  return projectView(actor, id)
})
