import { listProjects } from '#shared/policies/lists'
import type { ProjectSummary } from '#shared/types/api'
import { projectsSeenBy } from '../../database/queries/projects'
import { presentProjectSummary } from '../../presenters/projects'

export default defineEventHandler(async (event): Promise<ProjectSummary[]> => {
  const actor = await requireActor(event)
  authorise(listProjects(actor))
  return (await projectsSeenBy(actor)).map(presentProjectSummary)
})
