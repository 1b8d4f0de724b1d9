import { idParams } from '#shared/schemas/people'
import { projectReferenceSchema } from '#shared/schemas/projects'
import type { ProjectReferenceView } from '#shared/types/api'
import { addReference } from '../../../../commands/projects/references'
import { presentReference } from '../../../../presenters/projects'

export default defineEventHandler(async (event): Promise<ProjectReferenceView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  await seenProject(actor, id)
  const reference = await addReference(actor, id, await bodyOf(event, projectReferenceSchema))
  setResponseStatus(event, 201)
  return presentReference(reference)
})
