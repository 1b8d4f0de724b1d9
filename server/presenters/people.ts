import type { Role, SessionView } from '#shared/types/api'
import type { DeviceView, OrganisationView, PersonView } from '#shared/types/people'
import { homeOf } from '#shared/people'
import type { Organisation, Session, User } from '../database'

const rolesOf = (user: User) => [...user.roleRows ?? []].sort((a, b) => a.position - b.position).map(row => row.role)

const organisationRef = (organisation: Organisation | null | undefined) => organisation ? { id: organisation.id, name: organisation.name } : null

const isStaff = (user: User, roles: readonly Role[]): boolean => user.organisationId === null && roles.some(role => role !== 'client')

/** `outboxInUse`: no mail server is set up, so that letters stay here. */
export function presentSession(user: User, outboxInUse: boolean): SessionView {
  const roles = rolesOf(user)
  return {
    user: { id: user.id, name: user.name, initials: user.initials, email: user.email, roles, organisation: organisationRef(user.organisation) },
    outbox: outboxInUse && isStaff(user, roles),
    home: homeOf(roles),
  }
}

export function presentPerson(user: User): PersonView {
  return {
    id: user.id,
    name: user.name,
    initials: user.initials,
    email: user.email,
    roles: rolesOf(user),
    organisation: organisationRef(user.organisation),
    state: user.disabledAt ? 'disabled' : user.passwordHash ? 'active' : 'invited',
    createdAt: user.createdAt.toISOString(),
  }
}

export function presentOrganisation(organisation: Organisation, people: number, projects: number): OrganisationView {
  return { id: organisation.id, name: organisation.name, people, projects, createdAt: organisation.createdAt.toISOString() }
}

export function presentDevice(session: Session, current: string): DeviceView {
  return {
    id: session.id,
    current: session.id === current,
    device: deviceWords(session.userAgent),
    ip: session.ip,
    signedInAt: session.createdAt.toISOString(),
    lastSeenAt: session.lastSeenAt.toISOString(),
  }
}

const BROWSERS: [RegExp, string][] = [[/Edg\//, 'Edge'], [/Firefox\//, 'Firefox'], [/OPR\//, 'Opera'], [/Chrome\//, 'Chrome'], [/Safari\//, 'Safari']]
const SYSTEMS: [RegExp, string][] = [[/Android/, 'Android'], [/iPhone|iPad/, 'iOS'], [/Windows/, 'Windows'], [/Mac OS X/, 'macOS'], [/Linux/, 'Linux']]

/** "Firefox on Windows": enough to know one's own devices again. */
export function deviceWords(userAgent: string): string {
  const browser = BROWSERS.find(([pattern]) => pattern.test(userAgent))?.[1]
  const system = SYSTEMS.find(([pattern]) => pattern.test(userAgent))?.[1]
  if (browser && system) return `${browser} on ${system}`
  return browser ?? system ?? 'Unknown device'
}
