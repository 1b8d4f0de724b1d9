import type { Transaction } from 'sequelize'
import type { Actor } from '#shared/policies/actor'
import type { InvitePerson } from '#shared/schemas/people'
import type { Role } from '#shared/types/api'
import { isDuplicate, Organisation, User, UserRole } from '../../database'
import { queueLetter } from '../../jobs/queue'
import { badInput, conflict, notFound } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { runCommand } from '../run'
import { createLink } from './links'

/** Gives a person exactly these roles, in this order. */
export async function setRoles(userId: string, roles: readonly Role[], transaction: Transaction): Promise<void> {
  await UserRole.destroy({ where: { userId }, transaction })
  await UserRole.bulkCreate(roles.map((role, position) => ({ userId, role, position })), { transaction })
}

export async function requireClient(organisationId: string, transaction: Transaction): Promise<void> {
  const found = await Organisation.findOne({ where: { id: organisationId, kind: 'client' }, transaction })
  if (!found) throw badInput('organisationId', 'This client is not in the list any more. Choose again.')
}

async function sendInvitation(actor: Actor, user: User, transaction: Transaction): Promise<void> {
  const link = await createLink('invitation', user.id, transaction)
  await queueLetter({
    kind: 'invitation',
    to: { name: user.name, address: user.email },
    by: actor.name,
    link: `/invitation/${link.token}`,
    expires: link.expiresAt.toISOString(),
  }, `invitation:${link.id}`, transaction)
}

/** Makes an account without a password and sends its owner a link to choose one. Returns the new person's id. */
export async function invitePerson(actor: Actor, input: InvitePerson): Promise<string> {
  try {
    return await runCommand(async (transaction, effects) => {
      if (input.organisationId) await requireClient(input.organisationId, transaction)
      const user = await User.create({
        id: newId(),
        email: input.email,
        name: input.name,
        initials: input.initials,
        organisationId: input.organisationId ?? null,
      }, { transaction })
      await setRoles(user.id, input.roles, transaction)
      await sendInvitation(actor, user, transaction)
      effects.audit.push({ event: 'person_invited', actorId: actor.id, subject: { person: user.id }, data: { roles: input.roles, organisationId: user.organisationId } })
      return user.id
    })
  }
  catch (error) {
    if (isDuplicate(error)) throw badInput('email', 'There is an account with this address already.', 'email_taken')
    throw error
  }
}

/** Sends another invitation; the link of the earlier one stops working. */
export async function inviteAgain(actor: Actor, userId: string): Promise<void> {
  await runCommand(async (transaction, effects) => {
    const user = await User.findByPk(userId, { lock: transaction.LOCK.UPDATE, transaction })
    if (!user) throw notFound('There is no such person.')
    if (user.passwordHash) throw conflict('already_active', `${user.name} has accepted the invitation already.`)
    if (user.disabledAt) throw conflict('disabled', `${user.name}'s account is disabled. Enable it first.`)
    await sendInvitation(actor, user, transaction)
    effects.audit.push({ event: 'person_invited_again', actorId: actor.id, subject: { person: user.id }, data: {} })
  })
}
