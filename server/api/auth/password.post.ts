import { changePasswordSchema } from '#shared/schemas/auth'
import { changePassword } from '../../commands/people/passwords'

export default defineEventHandler(async (event) => {
  const actor = await requireActor(event)
  const { current, next } = await bodyOf(event, changePasswordSchema)
  await changePassword(actor, next, async ({ email, passwordHash }) =>
    await withinSignInLimits(email, addressOf(event), async () => await matchesSecret(passwordHash, current) || null) === true)
  setResponseStatus(event, 204)
})
