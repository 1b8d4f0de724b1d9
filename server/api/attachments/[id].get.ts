import { idParams } from '#shared/schemas/people'
import { attachmentSeenBy } from '../../database/queries/attachments'
import { getFile } from '../../storage'

/** A picture. Its bytes never change, so a browser may keep them; nothing in it is ever run. */
export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const attachment = await attachmentSeenBy(actor, paramsOf(event, idParams).id)
  const bytes = attachment ? await getFile(attachment.storageKey) : null
  if (!attachment || !bytes) throw notFound('There is no such picture.')
  setResponseHeaders(event, {
    'content-type': attachment.mime,
    'content-length': bytes.byteLength,
    'cache-control': 'private, max-age=31536000, immutable',
    'content-disposition': 'inline',
    'x-content-type-options': 'nosniff',
    'content-security-policy': 'default-src \'none\'; sandbox',
  })
  return bytes
})
