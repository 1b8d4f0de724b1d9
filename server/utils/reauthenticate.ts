import type { H3Event } from 'h3'
import type { Actor } from '#shared/policies/actor'
import { User } from '../database'
import { refusal } from './errors'
import { matchesSecret } from './passwords'
import { addressOf } from './session'
import { withinSignInLimits } from './signInLimits'

/** Makes sure that it is still the person who signed in: needed for each signature. 403 `wrong_password`, 429 after too many. */
export async function reauthenticate(event: H3Event, actor: Actor, password: string): Promise<void> {
  const user = await User.findByPk(actor.id)
  const matches = user && await withinSignInLimits(user.email, addressOf(event), async () => await matchesSecret(user.passwordHash, password) || null)
  if (!matches) throw refusal(403, { code: 'wrong_password', field: 'password', help: 'That is not your password. Nothing was signed.' })
}
