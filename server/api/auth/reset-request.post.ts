import { resetRequestSchema } from '#shared/schemas/auth'
import { requestReset } from '../../commands/people/passwords'

/** Public. Answers the same, and as fast, whether there is such an account or not. */
export default defineEventHandler(async (event) => {
  const { email } = await bodyOf(event, resetRequestSchema)
  event.waitUntil(requestReset(email).catch(error => log('error', 'reset_request_failed', errorFields(error))))
  setResponseStatus(event, 202)
  return { help: 'If there is an account with this address, a link to choose a new password is on its way. It works for an hour.' }
})
