import { Op } from 'sequelize'
import type { Transaction } from 'sequelize'
import { LIMITS } from '#shared/limits'
import { passwordProblem } from '#shared/people'
import type { Actor } from '#shared/policies/actor'
import type { AuditEvent } from '../../audit/events'
import { OneTimeLink, User } from '../../database'
import type { LinkKind } from '../../database'
import { queueLetter } from '../../jobs/queue'
import { badInput, conflict, refusal } from '../../utils/errors'
import { hashSecret, matchesSecret } from '../../utils/passwords'
import { runCommand } from '../run'
import { createLink, findLink, spendLink } from './links'
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

interface Spending {
  kind: LinkKind
  token: string
  password: string
  /** What else happens to the person's row. */
  change?: (user: User) => void
  audit: (userId: string) => AuditEvent
}

/** Spends a link and sets the password that came with it. All other sessions of the person end. Returns the person's id. */
async function setByLink({ kind, token, password, change, audit }: Spending): Promise<string> {
  const { email } = await readLink(kind, token)
  refuseWeak(password, email, 'password')
  const passwordHash = await hashSecret(password)
  return runCommand(async (transaction, effects) => {
    const id = await spendLink(kind, token, transaction)
    const user = await requireUser(id, transaction)
    change?.(user)
    await user.set({ passwordHash }).save({ transaction })
    await endSessionsOf(id, transaction)
    effects.audit.push(audit(id))
    effects.revoked.push({ kind: 'user', id })
    return id
  })
}

/** The first password of an invited person, who may correct the name. */
export const acceptInvitation = (token: string, password: string, name?: string): Promise<string> => setByLink({
  kind: 'invitation',
  token,
  password,
  change: (user) => {
    if (user.passwordHash) throw conflict('already_active', 'This invitation has been accepted. Sign in.')
    if (name) user.name = name
  },
  audit: id => ({ event: 'account_opened', actorId: id, subject: { person: id }, data: {} }),
})

export const resetPassword = (token: string, password: string): Promise<string> => setByLink({
  kind: 'reset',
  token,
  password,
  audit: id => ({ event: 'password_changed', actorId: id, subject: { person: id }, data: { by: 'link' } }),
})

/** Sends a link to choose a new password, if there is such an account; whoever asks cannot tell. */
export async function requestReset(email: string): Promise<void> {
  await runCommand(async (transaction) => {
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
  const passwordHash = await hashSecret(next)
  await runCommand(async (transaction, effects) => {
    await User.update({ passwordHash }, { where: { id: actor.id }, transaction })
    await endSessionsOf(actor.id, transaction, actor.sessionId)
    effects.audit.push({ event: 'password_changed', actorId: actor.id, subject: { person: actor.id }, data: { by: 'person' } })
    effects.revoked.push({ kind: 'user', id: actor.id, exceptSession: actor.sessionId })
  })
}
