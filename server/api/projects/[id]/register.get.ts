import { idParams } from '#shared/schemas/people'
import { registerQuerySchema } from '#shared/schemas/sheets'
import type { RegisterRow } from '#shared/types/api'

export default defineEventHandler(async (event): Promise<RegisterRow[]> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const { state, q, sort } = queryOf(event, registerQuerySchema)
  await seenProject(actor, id)
  return registerRows({ kind: 'project', projectId: id }, { states: state, text: q, sort })
})
