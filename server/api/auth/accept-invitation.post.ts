import { acceptInvitationSchema } from '#shared/schemas/auth'
import { acceptInvitation } from '../../commands/people/passwords'

/** Public: the link's token says who it is. Sets the first password and signs in. */
export default defineEventHandler(async (event) => {
  const { token, password, name } = await bodyOf(event, acceptInvitationSchema)
  const userId = await acceptInvitation(token, password, name)
  await openSession(event, userId)
  return sessionView(userId)
})
