import type { Transaction } from 'sequelize'
import type { ProjectMembers } from '#shared/schemas/projects'
import { Organisation, ProjectMember } from '../../database'
import { peopleById } from '../../database/queries/people'
import { badInput } from '../../utils/errors'

/** Refuses who is unknown, disabled or of a client, and managers who are none. */
export async function requirePeople({ memberIds, managerIds }: ProjectMembers, transaction: Transaction): Promise<void> {
  const people = await peopleById([...memberIds, ...managerIds], transaction)
  const check = (ids: readonly string[], field: string, manager: boolean) => ids.forEach((id, index) => {
    const person = people.get(id)
    if (!person || person.disabled || person.organisationId !== null) throw badInput(`${field}.${index}`, `${person?.name ?? 'This person'} cannot be a member: only the firm's people with an open account can.`)
    if (manager && !person.roles.includes('manager')) throw badInput(`${field}.${index}`, `${person.name} is not a manager.`)
  })
  check(memberIds, 'memberIds', false)
  check(managerIds, 'managerIds', true)
}

export async function requireClientOrganisation(id: string | null | undefined, transaction: Transaction): Promise<void> {
  if (!id) return
  const found = await Organisation.findOne({ where: { id, kind: 'client' }, transaction })
  if (!found) throw badInput('clientId', 'This client is not in the list any more. Choose again.')
}

/** Gives a project exactly these members and managers. */
export async function writeMembers(projectId: string, { memberIds, managerIds }: ProjectMembers, transaction: Transaction): Promise<void> {
  await ProjectMember.destroy({ where: { projectId }, transaction })
  await ProjectMember.bulkCreate([
    ...[...new Set(memberIds)].map(userId => ({ projectId, userId, role: 'member' as const })),
    ...[...new Set(managerIds)].map(userId => ({ projectId, userId, role: 'manager' as const })),
  ], { transaction })
}
