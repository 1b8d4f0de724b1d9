import { User } from '../../database'
import { hashSecret, matchesSecret, needsNewHash } from '../../utils/passwords'

/** The id of whom the address and password belong to, else null. Unknown, invited and disabled people take the same time. */
export async function signIn(email: string, password: string): Promise<string | null> {
  const user = await User.findOne({ where: { email } })
  const matches = await matchesSecret(user?.passwordHash ?? null, password)
  if (!user?.passwordHash || !matches || user.disabledAt) return null
  if (needsNewHash(user.passwordHash)) await user.update({ passwordHash: await hashSecret(password) })
  return user.id
}
