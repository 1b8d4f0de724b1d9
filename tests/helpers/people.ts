/** People and clients made for one test, each with a name of its own, so that tests share a database without meeting. */
import { randomBytes, randomUUID } from 'node:crypto'
import { Hash } from '@adonisjs/hash'
import { Scrypt } from '@adonisjs/hash/drivers/scrypt'
import { sealSession } from 'h3'
import type { H3Event } from 'h3'
import { base } from './base'
import { initialsOf } from '../../shared/people'
import type { Role } from '../../shared/types/api'
import { newId } from '../../server/utils/ids'
import { Client } from './client'

export const PASSWORD = 'pole-and-zero-2026'
export const SESSION_COOKIE = 'polewright-session'

/** Cheap on purpose: the figures are written in the hash, so the server takes it as it is. */
const cheapHash = new Hash(new Scrypt({ cost: 2 ** 10 })).make(PASSWORD)

export interface Person { id: string, email: string, name: string, initials: string, roles: Role[], organisationId: string | null, password: string }

const database = () => import('../../server/database')

const FIRST = ['Ines', 'Tomas', 'Marta', 'Piet', 'Ruth', 'Nadia', 'Owen', 'Lena', 'Arvid', 'Sofia']
let made = 0

/** An unused word, for titles and numbers. */
export const unique = (prefix = ''): string => `${prefix}${randomBytes(5).toString('hex')}`

export async function createPerson(given: Partial<Omit<Person, 'id' | 'password'>> & { invited?: boolean } = {}): Promise<Person> {
  const { User, UserRole } = await database()
  const name = given.name ?? `${FIRST[made++ % FIRST.length]} ${unique('T')}`
  const person: Person = {
    id: newId(),
    email: given.email ?? `${unique('p')}@polewright.example`,
    name,
    initials: given.initials ?? initialsOf(name),
    roles: given.roles ?? ['engineer'],
    organisationId: given.organisationId ?? null,
    password: PASSWORD,
  }
  await User.create({
    id: person.id,
    email: person.email,
    name: person.name,
    initials: person.initials,
    organisationId: person.organisationId,
    passwordHash: given.invited ? null : await cheapHash,
  })
  await UserRole.bulkCreate(person.roles.map((role, position) => ({ userId: person.id, role, position })))
  return person
}

export async function createClientOrganisation(name = `Client ${unique()}`): Promise<{ id: string, name: string }> {
  const { Organisation } = await database()
  const { id } = await Organisation.create({ id: newId(), name, kind: 'client' })
  return { id, name }
}

export const createClientPerson = async (organisationId?: string): Promise<Person> =>
  createPerson({ roles: ['client'], organisationId: organisationId ?? (await createClientOrganisation()).id })

/** A new session's id and the sealed cookie for it. */
export async function openSessionFor(person: Pick<Person, 'id'>): Promise<{ id: string, cookie: string }> {
  const { Session } = await database()
  const now = new Date()
  const id = [...randomBytes(26)].map(byte => '0123456789ABCDEFGHJKMNPQRSTVWXYZ'[byte & 31]).join('')
  await Session.create({ id, userId: person.id, createdAt: now, lastSeenAt: now, expiresAt: new Date(now.getTime() + 60 * 60 * 1000), userAgent: 'tests', ip: '127.0.0.1' })
  const event = { context: { sessions: { [SESSION_COOKIE]: { id: randomUUID(), createdAt: now.getTime(), data: { secure: { sid: id } } } } } }
  const cookie = await sealSession(event as unknown as H3Event, { name: SESSION_COOKIE, password: base().sessionPassword })
  return { id, cookie }
}

/** A client that is signed in as this person, without the half second that hashing a password takes. */
export async function signedIn(person: Pick<Person, 'id'>, baseUrl?: string): Promise<Client & { sessionId: string }> {
  const { id, cookie } = await openSessionFor(person)
  const client = new Client(baseUrl)
  client.setCookie(SESSION_COOKIE, cookie)
  return Object.assign(client, { sessionId: id })
}
