import { projectReferenceSchema, referenceParams } from '#shared/schemas/projects'
import type { ProjectReferenceView } from '#shared/types/api'
import { changeReference } from '../../../../commands/projects/references'
import { presentReference } from '../../../../presenters/projects'

export default defineEventHandler(async (event): Promise<ProjectReferenceView> => {
  const actor = await requireActor(event)
  const { id, rid } = paramsOf(event, referenceParams)
  await seenProject(actor, id)
  return presentReference(await changeReference(actor, id, rid, await bodyOf(event, projectReferenceSchema)))
})
