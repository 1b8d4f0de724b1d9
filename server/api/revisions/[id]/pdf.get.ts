import { mayDo, see } from '#shared/policies/revisions'
import { idParams } from '#shared/schemas/people'
import { issueOfRevision } from '../../../database/issues'
import { findRevisionRecord } from '../../../database/queries/revisionRecord'
import { pdfHeaders } from '../../../presenters/pdf'
import { getFile, sha256Of } from '../../../storage'
import { authorise, authoriseSight } from '../../../utils/authorise'
import { notFound, unavailable } from '../../../utils/errors'
import { requireActor } from '../../../utils/session'
import { paramsOf } from '../../../utils/validation'

/** The stamped file of an issued revision, byte for byte as it was stored. */
export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { id } = paramsOf(event, idParams)
  const record = await findRevisionRecord(id)
  if (!record) throw notFound()
  authoriseSight(see(actor, record.facts))
  authorise(mayDo('download', actor, record.facts))
  const issue = await issueOfRevision(id)
  const file = issue && await getFile(issue.pdfStorageKey)
  if (!file || sha256Of(file) !== issue.pdfHash) throw unavailable('The stored file could not be read. It has been noted; the record itself is safe.')
  setResponseHeaders(event, pdfHeaders(record.submission?.titleBlock.number ?? record.sheet.number, record.revision.label, file.byteLength))
  return file
})
