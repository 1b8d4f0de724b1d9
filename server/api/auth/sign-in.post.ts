import { signInSchema } from '#shared/schemas/auth'
import { signIn } from '../../commands/people/signIn'

/** Public. Opens a session on this device. */
export default defineEventHandler(async (event) => {
  const { email, password } = await bodyOf(event, signInSchema)
  const userId = await withinSignInLimits(email, addressOf(event), () => signIn(email, password))
  if (!userId) {
    throw refusal(401, { code: 'wrong_credentials', field: 'password', help: 'The address or the password is not right. Mind capital letters, or have a new password sent to you.' })
  }
  await openSession(event, userId)
  return sessionView(userId)
})
