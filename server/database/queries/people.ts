import { Op, type Transaction } from 'sequelize'
import type { Role } from '#shared/types/api'
import { User, UserRole } from '..'

export interface KnownPerson { id: string, name: string, initials: string, email: string, roles: Role[], disabled: boolean, organisationId: string | null }

const known = (user: User): KnownPerson => ({
  id: user.id, name: user.name, initials: user.initials, email: user.email,
  roles: (user.roleRows ?? []).map(row => row.role),
  disabled: user.disabledAt !== null,
  organisationId: user.organisationId,
})

const withRoles = { include: [{ model: UserRole, as: 'roleRows' }] }

/** People by id; unknown ids are left out. */
export async function peopleById(ids: readonly (string | null)[], transaction?: Transaction): Promise<Map<string, KnownPerson>> {
  const wanted = [...new Set(ids.filter(id => id !== null))]
  if (wanted.length === 0) return new Map()
  const users = await User.findAll({ where: { id: { [Op.in]: wanted } }, ...withRoles, transaction })
  return new Map(users.map(user => [user.id, known(user)]))
}

/** The people of a client organisation who can sign in. */
export async function peopleOfClient(organisationId: string, transaction?: Transaction): Promise<KnownPerson[]> {
  const users = await User.findAll({ where: { organisationId, disabledAt: null }, ...withRoles, order: [['name', 'ASC']], transaction })
  return users.map(known).filter(person => person.roles.includes('client'))
}

export async function findPerson(id: string, transaction?: Transaction): Promise<KnownPerson | null> {
  return (await peopleById([id], transaction)).get(id) ?? null
}
