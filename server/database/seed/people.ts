import type { Actor } from '#shared/policies/actor'
import { DEMONSTRATION_PASSWORD } from '#shared/demonstration'
import type { Role } from '#shared/types/api'
import { newId } from '../../utils/ids'
import { hashSecret } from '../../utils/passwords'
import { Organisation, User, UserRole } from '../models/people'

/** The invented firm, its clients and everybody's roles; the first role says where one lands. */
const ORGANISATIONS = {
  firm: 'Halden & Voss Consulting Engineers',
  ferries: 'Norrsund Ferries',
  water: 'Calder Water',
  railway: 'Tarn Valley Light Rail',
} as const
type OrganisationKey = keyof typeof ORGANISATIONS

interface Person { email: string, name: string, initials: string, roles: Role[], client?: OrganisationKey }

const PEOPLE = {
  ines: { email: 'ines.varga@haldenvoss.example', name: 'Ines Varga', initials: 'IV', roles: ['engineer'] },
  tomas: { email: 'tomas.reyl@haldenvoss.example', name: 'Tomas Reyl', initials: 'TR', roles: ['engineer'] },
  marta: { email: 'marta.lindqvist@haldenvoss.example', name: 'Marta Lindqvist', initials: 'ML', roles: ['checker', 'engineer'] },
  piet: { email: 'piet.aalders@haldenvoss.example', name: 'Piet Aalders', initials: 'PA', roles: ['checker'] },
  ruth: { email: 'ruth.osei@haldenvoss.example', name: 'Ruth Osei', initials: 'RO', roles: ['manager'] },
  nadia: { email: 'nadia.berg@norrsund-ferries.example', name: 'Nadia Berg', initials: 'NB', roles: ['client'], client: 'ferries' },
  owen: { email: 'owen.pryce@calder-water.example', name: 'Owen Pryce', initials: 'OP', roles: ['client'], client: 'water' },
} satisfies Record<string, Person>
export type PersonKey = keyof typeof PEOPLE

export interface Cast { people: Record<PersonKey, Actor>, organisations: Record<OrganisationKey, string> }

const entriesOf = <K extends string, V>(record: Record<K, V>) => Object.entries(record) as [K, V][]

async function createOrganisations(): Promise<Cast['organisations']> {
  const made = await Promise.all(entriesOf(ORGANISATIONS).map(async ([key, name]) => {
    const row = await Organisation.create({ id: newId(), name, kind: key === 'firm' ? 'firm' : 'client' })
    return [key, row.id] as const
  }))
  return Object.fromEntries(made) as Cast['organisations']
}

async function createPerson(person: Person, organisations: Cast['organisations']): Promise<void> {
  const { email, name, initials, roles, client } = person
  const user = await User.create({
    id: newId(), email, name, initials, organisationId: client ? organisations[client] : null, passwordHash: await hashSecret(DEMONSTRATION_PASSWORD),
  })
  await UserRole.bulkCreate(roles.map((role, position) => ({ userId: user.id, role, position })))
}

export async function createCast(): Promise<Cast> {
  const organisations = await createOrganisations()
  for (const person of Object.values(PEOPLE) as Person[]) await createPerson(person, organisations)
  return loadCast()
}

/** The people as the commands know them. */
export async function loadCast(): Promise<Cast> {
  const users = await User.findAll({ where: { email: Object.values(PEOPLE).map(person => person.email) }, include: [{ model: UserRole, as: 'roleRows' }] })
  const people = entriesOf<PersonKey, Person>(PEOPLE).map(([key, person]) => {
    const user = users.find(one => one.email === person.email)
    if (!user) throw new Error(`${person.email} is not in the database.`)
    const actor: Actor = { id: user.id, name: user.name, initials: user.initials, roles: person.roles, organisationId: user.organisationId, sessionId: 'demonstration' }
    return [key, actor] as const
  })
  const organisations = await Organisation.findAll()
  const byName = new Map(organisations.map(one => [one.name, one.id]))
  return {
    people: Object.fromEntries(people) as Cast['people'],
    organisations: Object.fromEntries(entriesOf(ORGANISATIONS).map(([key, name]) => [key, byName.get(name) ?? ''])) as Cast['organisations'],
  }
}
