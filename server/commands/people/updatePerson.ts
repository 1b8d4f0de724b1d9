import { Op, QueryTypes } from 'sequelize'
import type { Transaction } from 'sequelize'
import type { Actor } from '#shared/policies/actor'
import type { UpdatePerson } from '#shared/schemas/people'
import type { Role } from '#shared/types/api'
import { OneTimeLink, sequelize, Session, User, UserRole } from '../../database'
import { badInput, conflict, notFound } from '../../utils/errors'
import { runCommand } from '../run'
import { requireClient, setRoles } from './invitePerson'

/** Ends every session of a person, except one that goes on. The command's effects tell open connections. */
export async function endSessionsOf(userId: string, transaction: Transaction, exceptSession?: string): Promise<void> {
  const except = exceptSession ? { id: { [Op.ne]: exceptSession } } : {}
  await Session.update({ revokedAt: new Date() }, { where: { userId, revokedAt: null, ...except }, transaction })
}

/** Locks the managers' rows, so that two managers cannot remove one another at once. */
async function refuseLastManager(userId: string, transaction: Transaction): Promise<void> {
  const others = await sequelize.query(
    `SELECT u.id FROM users u JOIN user_roles r ON r.user_id = u.id AND r.role = 'manager'
     WHERE u.disabled_at IS NULL AND u.password_hash IS NOT NULL ORDER BY u.id FOR UPDATE`,
    { type: QueryTypes.SELECT, transaction },
  ) as { id: string }[]
  if (!others.some(other => other.id !== userId)) {
    throw conflict('last_manager', 'This is the only manager who can sign in. Make someone else a manager first.')
  }
}

async function rolesOf(userId: string, transaction: Transaction): Promise<Role[]> {
  const rows = await UserRole.findAll({ where: { userId }, order: ['position'], transaction })
  return rows.map(row => row.role)
}

/** Staff and clients are kept apart: what one has seen and signed must not come to belong to the other. */
function refuseCrossing(user: User, roles: readonly Role[], organisationId: string | null): void {
  const wasClient = user.organisationId !== null
  if (wasClient !== roles.includes('client')) {
    throw badInput('roles', 'A client\'s person cannot become one of the firm, nor the other way round. Disable this account and invite the person anew.')
  }
  if (wasClient && organisationId !== user.organisationId) {
    throw badInput('organisationId', 'A person stays with the client they were invited for. Disable this account and invite the person anew.')
  }
}

async function changeRoles(user: User, input: UpdatePerson, transaction: Transaction): Promise<void> {
  if (!input.roles) return
  refuseCrossing(user, input.roles, input.organisationId ?? null)
  if (input.organisationId) await requireClient(input.organisationId, transaction)
  const before = await rolesOf(user.id, transaction)
  if (before.includes('manager') && !input.roles.includes('manager')) await refuseLastManager(user.id, transaction)
  await setRoles(user.id, input.roles, transaction)
}

async function disable(actor: Actor, user: User, transaction: Transaction): Promise<void> {
  if (user.disabledAt) return
  if (user.id === actor.id) throw conflict('own_account', 'You cannot disable your own account. Another manager can.')
  if ((await rolesOf(user.id, transaction)).includes('manager')) await refuseLastManager(user.id, transaction)
  const now = new Date()
  user.disabledAt = now
  await OneTimeLink.update({ usedAt: now }, { where: { userId: user.id, usedAt: null }, transaction })
  await endSessionsOf(user.id, transaction)
}

/** Changes a person's name, roles or state. Disabling ends their sessions at once; what they wrote and signed stays. */
export async function updatePerson(actor: Actor, userId: string, input: UpdatePerson): Promise<void> {
  await runCommand(async (transaction, effects) => {
    const user = await User.findByPk(userId, { lock: transaction.LOCK.UPDATE, transaction })
    if (!user) throw notFound('There is no such person.')
    if (input.name !== undefined) user.name = input.name
    if (input.initials !== undefined) user.initials = input.initials
    await changeRoles(user, input, transaction)
    if (input.disabled === true) await disable(actor, user, transaction)
    if (input.disabled === false) user.disabledAt = null
    await user.save({ transaction })
    effects.audit.push({ event: 'person_changed', actorId: actor.id, subject: { person: userId }, data: { changed: input } })
    if (input.disabled || input.roles) effects.revoked.push({ kind: 'user', id: userId })
  })
}
