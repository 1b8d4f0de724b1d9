import { resetSchema } from '#shared/schemas/auth'
import { resetPassword } from '../../commands/people/passwords'

/** Public: the link's token says who it is. Sets the new password, ends all other sessions, signs in. */
export default defineEventHandler(async (event) => {
  const { token, password } = await bodyOf(event, resetSchema)
  const userId = await resetPassword(token, password)
  await openSession(event, userId)
  return sessionView(userId)
})
