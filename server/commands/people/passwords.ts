import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { LIMITS } from '#shared/limits'
import { passwordProblem } from '#shared/people'
import type { Actor } from '#shared/policies/actor'
import { OneTimeLink, User, withTransaction } from '../../database'
import type { LinkKind } from '../../database'
import { badInput, conflict, refusal } from '../../utils/errors'
import { hashSecret, matchesSecret } from '../../utils/passwords'
import { revocations } from '../../utils/revocation'
import { createLink, findLink, spendLink } from './links'
import { queueLetter } from './post'
import { endSessionsOf } from './updatePerson'

const HOUR = 60 * 60 * 1000

function refuseWeak(password: string, email: string, field: string): void {
  const problem = passwordProblem(password, email)
  if (problem) throw badInput(field, problem, 'weak_password')
}

async function requireUser(id: string, transaction?: Transaction): Promise<User> {
  const user = await User.findByPk(id, { transaction, lock: transaction?.LOCK.UPDATE })
  if (!user || user.disabledAt) throw refusal(404, { code: 'link_not_valid', field: 'token', help: 'This account is disabled. Ask a manager of the firm.' })
  return user
}

/** Whom a link is for, before it is spent. */
export async function readLink(kind: LinkKind, token: string): Promise<{ name: string, email: string }> {
  const link = await findLink(kind, token)
  const { name, email } = await requireUser(link.userId)
  return { name, email }
}

/** Spends a link and sets the password that came with it. All other sessions of the person end. Returns the person's id. */
async function setByLink(kind: LinkKind, token: string, password: string, change: (user: User) => void = () => {}): Promise<string> {
  const { email } = await readLink(kind, token)
  refuseWeak(password, email, 'password')
  const hash = await hashSecret(password)
  const userId = await withTransaction(async (transaction) => {
    const id = await spendLink(kind, token, transaction)
    const user = await requireUser(id, transaction)
    change(user)
    user.passwordHash = hash
    await user.save({ transaction })
    await endSessionsOf(id, transaction)
    return id
  })
  revocations.emit({ kind: 'user', id: userId })
  return userId
}

/** The first password of an invited person, who may correct the name. */
export const acceptInvitation = (token: string, password: string, name?: string): Promise<string> =>
  setByLink('invitation', token, password, (user) => {
    if (user.passwordHash) throw conflict('already_active', 'This invitation has been accepted. Sign in.')
    if (name) user.name = name
  })

export const resetPassword = (token: string, password: string): Promise<string> => setByLink('reset', token, password)

/** Sends a link to choose a new password, if there is such an account; whoever asks cannot tell. */
export async function requestReset(email: string): Promise<void> {
  await withTransaction(async (transaction) => {
    const user = await User.findOne({ where: { email, disabledAt: null, passwordHash: { [Op.ne]: null } }, lock: transaction.LOCK.UPDATE, transaction })
    if (!user) return
    const recent = await OneTimeLink.count({ where: { kind: 'reset', userId: user.id, createdAt: { [Op.gt]: new Date(Date.now() - HOUR) } }, transaction })
    if (recent >= LIMITS.links.resetsPerHour) return
    const link = await createLink('reset', user.id, transaction)
    await queueLetter({
      kind: 'password_reset',
      to: { name: user.name, address: user.email },
      link: `/reset/${link.token}`,
      expires: link.expiresAt.toISOString(),
    }, `reset:${link.id}`, transaction)
  })
}

/** Changes one's own password; the other devices are signed out. `verify` runs the comparison under the sign-in limits. */
export async function changePassword(actor: Actor, next: string, verify: (user: User) => Promise<boolean>): Promise<void> {
  const user = await User.findByPk(actor.id)
  if (!user || !await verify(user)) throw refusal(403, { code: 'wrong_password', field: 'current', help: 'That is not your present password.' })
  refuseWeak(next, user.email, 'next')
  if (await matchesSecret(user.passwordHash, next)) throw badInput('next', 'Choose another password than the present one.', 'same_password')
  const hash = await hashSecret(next)
  await withTransaction(async (transaction) => {
    await User.update({ passwordHash: hash }, { where: { id: actor.id }, transaction })
    await endSessionsOf(actor.id, transaction, actor.sessionId)
  })
  revocations.emit({ kind: 'user', id: actor.id, exceptSession: actor.sessionId })
}
