import { idParams } from '#shared/schemas/people'
import type { ProjectReferenceView } from '#shared/types/api'
import { ProjectReference } from '../../../../database'
import { presentReference } from '../../../../presenters/projects'

export default defineEventHandler(async (event): Promise<ProjectReferenceView[]> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenProject(actor, id)
  const references = await ProjectReference.findAll({ where: { projectId: id }, order: [['designation', 'ASC'], ['edition', 'ASC']] })
  return references.map(presentReference)
})
