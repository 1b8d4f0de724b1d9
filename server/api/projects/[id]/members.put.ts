import { idParams } from '#shared/schemas/people'
import { projectMembersSchema } from '#shared/schemas/projects'
import type { ProjectDetail } from '#shared/types/api'
import { setMembers } from '../../../commands/projects/setMembers'

export default defineEventHandler(async (event): Promise<ProjectDetail> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenProject(actor, id)
  await setMembers(actor, id, await bodyOf(event, projectMembersSchema))
  return projectView(actor, id)
})
