import { QueryTypes } from 'sequelize'
import { emailSchema, nameSchema } from '#shared/schemas/auth'
import { initialsOf } from '#shared/people'
import { isDuplicate, sequelize, User } from '../../database'
import { badInput, conflict } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { runCommand } from '../run'
import { setRoles } from './invitePerson'
import { createLink } from './links'

const MANAGERS = `SELECT u.name FROM users u JOIN user_roles r ON r.user_id = u.id AND r.role = 'manager'
  WHERE u.disabled_at IS NULL AND u.password_hash IS NOT NULL LIMIT 1`

/**
 * For whoever runs the server: an account for a manager while nobody can sign in as one, so that a new firm can begin. Asked for
 * again for the same address, it gives a new link. Returns the link's path, which is shown once and kept nowhere.
 */
export async function inviteFirstManager(address: string, fullName: string): Promise<string> {
  const [email, name] = [emailSchema.safeParse(address), nameSchema.safeParse(fullName)]
  if (!email.success) throw badInput('email', email.error.issues[0]!.message)
  if (!name.success) throw badInput('name', name.error.issues[0]!.message)
  try {
    return await runCommand(async (transaction, effects) => {
      const [manager] = await sequelize.query<{ name: string }>(MANAGERS, { type: QueryTypes.SELECT, transaction })
      if (manager) throw conflict('has_manager', `${manager.name} is a manager already and can invite people.`)
      const known = await User.findOne({ where: { email: email.data, passwordHash: null }, transaction })
      const user = known ?? await User.create({ id: newId(), email: email.data, name: name.data, initials: initialsOf(name.data) || 'M' }, { transaction })
      await setRoles(user.id, ['manager'], transaction)
      const { token } = await createLink('invitation', user.id, transaction)
      effects.audit.push({ event: 'person_invited', actorId: null, subject: { person: user.id }, data: { roles: ['manager'], organisationId: null } })
      return `/invitation/${token}`
    })
  }
  catch (error) {
    throw isDuplicate(error) ? badInput('email', 'There is an account with this address already.', 'email_taken') : error
  }
}
