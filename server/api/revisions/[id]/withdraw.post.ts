import { mayDo } from '#shared/policies/revisions'
import { idParams } from '#shared/schemas/people'
import { withdrawSchema } from '#shared/schemas/revisions'
import type { RevisionView } from '#shared/types/api'
import { withdrawRevision } from '../../../commands/revisions/withdrawRevision'

/** It takes the sheet from its recipients, so the password is asked for again; who may not is told so before. */
export default defineEventHandler(async (event): Promise<RevisionView> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const record = await seenRevision(actor, id)
  authorise(mayDo('withdraw', actor, record.facts))
  const { password, ...input } = await bodyOf(event, withdrawSchema)
  await reauthenticate(event, actor, password)
  await withdrawRevision(actor, id, input)
  return revisionView(actor, id)
})
