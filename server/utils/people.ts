/** Reading people and clients for the routes that show them. */
import { QueryTypes } from 'sequelize'
import type { SessionView } from '#shared/types/api'
import type { OrganisationView, PersonView } from '#shared/types/people'
import { Organisation, sequelize, User, UserRole } from '../database'
import { usesOutbox } from '../mail'
import { presentOrganisation, presentPerson, presentSession } from '../presenters/people'
import { notFound } from './errors'

/** What a presenter of a person needs with the row. */
export const withBelonging = [{ model: UserRole, as: 'roleRows' }, { model: Organisation, as: 'organisation' }]

async function requirePerson(id: string): Promise<User> {
  const user = await User.findByPk(id, { include: withBelonging })
  if (!user) throw notFound('There is no such person.')
  return user
}

/** What the pages know about who is signed in. */
export const sessionView = async (userId: string): Promise<SessionView> => presentSession(await requirePerson(userId), usesOutbox())

export const personView = async (userId: string): Promise<PersonView> => presentPerson(await requirePerson(userId))

interface Counts { id: string, people: number, projects: number }

const COUNTS = `SELECT o.id,
    (SELECT COUNT(*) FROM users u WHERE u.organisation_id = o.id) AS people,
    (SELECT COUNT(*) FROM projects p WHERE p.client_id = o.id) AS projects
  FROM organisations o WHERE o.kind = 'client'`

/** The firm's clients by name. */
export async function clientViews(): Promise<OrganisationView[]> {
  const [organisations, counts] = await Promise.all([
    Organisation.findAll({ where: { kind: 'client' }, order: [['name', 'ASC']] }),
    sequelize.query<Counts>(COUNTS, { type: QueryTypes.SELECT }),
  ])
  const byId = new Map(counts.map(count => [count.id, count]))
  return organisations.map(one => presentOrganisation(one, Number(byId.get(one.id)?.people ?? 0), Number(byId.get(one.id)?.projects ?? 0)))
}

export async function clientView(id: string): Promise<OrganisationView> {
  const found = (await clientViews()).find(client => client.id === id)
  if (!found) throw notFound('There is no such client.')
  return found
}
