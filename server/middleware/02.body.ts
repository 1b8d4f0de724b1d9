import { LIMITS } from '#shared/limits'

/** Bodies are read whole into memory, so their size is known and bounded before anyone reads them. */
export default defineEventHandler((event) => {
  const length = getHeader(event, 'content-length')
  if (length === undefined) {
    if (getHeader(event, 'transfer-encoding')) throw refusal(411, { code: 'length_required', help: 'Say how long the body is (Content-Length).' })
    return
  }
  const upload = getHeader(event, 'content-type')?.startsWith('multipart/form-data') ?? false
  const limit = upload ? LIMITS.uploadBody : LIMITS.requestBody
  if (Number(length) <= limit) return
  throw refusal(413, { code: 'too_large', help: `This is larger than the ${Math.floor(limit / 1024 / 1024)} MB that can be taken at once.` })
})
