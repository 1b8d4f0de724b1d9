import { isStaff } from '#shared/policies/actor'
import { see } from '#shared/policies/revisions'
import { idParams } from '#shared/schemas/people'
import type { RecipientView } from '#shared/types/issue'
import { recipientsOf } from '../../../database/issues'
import { findRevisionRecord } from '../../../database/queries/revisionRecord'
import { authoriseSight } from '../../../utils/authorise'
import { notAllowed, notFound } from '../../../utils/errors'
import { requireActor } from '../../../utils/session'
import { paramsOf } from '../../../utils/validation'

/** To whom an issued revision was sent: for the firm. */
export default defineEventHandler(async (event): Promise<RecipientView[]> => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const record = await findRevisionRecord(id)
  if (!record) throw notFound()
  authoriseSight(see(actor, record.facts))
  if (!isStaff(actor)) throw notAllowed('To whom a sheet was sent is kept by the firm.')
  return recipientsOf(id)
})
