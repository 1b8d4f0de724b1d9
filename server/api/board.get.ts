import { managersBoard } from '#shared/policies/lists'
import type { RegisterRow } from '#shared/types/api'

/** Every revision that awaits someone, in all projects. */
export default defineEventHandler(async (event): Promise<RegisterRow[]> => {
  const actor = await requireActor(event)
  authorise(managersBoard(actor))
  return registerRows({ kind: 'open' }, { sort: 'since' })
})
