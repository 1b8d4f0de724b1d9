/**
 * Who is asking. The sealed cookie holds only the id of a row in `sessions`; that row, the person's state and roles are read at
 * every request, so that an ended session, a disabled person or a changed role counts at once.
 */
import { randomBytes } from 'node:crypto'
import { getCookie, getHeader, getRequestIP } from 'h3'
import type { H3Event } from 'h3'
import type { Actor } from '#shared/policies/actor'
import { LIMITS } from '#shared/limits'
import { Session, User, UserRole } from '../database'
import { notSignedIn } from './errors'
import { revocations } from './revocation'

declare module '#auth-utils' {
  interface SecureSessionData { sid?: string }
}

const BASE32 = '0123456789ABCDEFGHJKMNPQRSTVWXYZ'

/** 130 random bits in 26 characters. */
const newSessionId = (): string => [...randomBytes(26)].map(byte => BASE32[byte & 31]).join('')

/** Of the connection itself; of a proxy's header only where POLEWRIGHT_TRUST_PROXY says that one stands in front and sets it. */
export function addressOf(event: H3Event): string {
  return getRequestIP(event, { xForwardedFor: process.env.POLEWRIGHT_TRUST_PROXY === 'yes' })?.slice(0, 45) ?? 'unknown'
}

function actorOf(session: Session): Actor | null {
  const { user } = session
  if (!user || user.disabledAt || !user.passwordHash) return null
  const roles = [...user.roleRows ?? []].sort((a, b) => a.position - b.position).map(row => row.role)
  return { id: user.id, name: user.name, initials: user.initials, roles, organisationId: user.organisationId, sessionId: session.id }
}

const isOver = (session: Session, now: number): boolean =>
  session.revokedAt !== null || session.expiresAt.getTime() <= now || session.lastSeenAt.getTime() + LIMITS.session.idle <= now

/** The person behind a session's id, as of this moment; null when the session is over or the person may not sign in any more. */
export async function actorOfSession(id: string, now = new Date()): Promise<Actor | null> {
  const session = await Session.findByPk(id, { include: [{ model: User, as: 'user', include: [{ model: UserRole, as: 'roleRows' }] }] })
  if (!session || isOver(session, now.getTime())) return null
  if (now.getTime() - session.lastSeenAt.getTime() > LIMITS.session.seenResolution) {
    await Session.update({ lastSeenAt: now }, { where: { id } })
  }
  return actorOf(session)
}

async function sessionIdOf(event: H3Event): Promise<string | null> {
  // Without the cookie nothing is opened: the library would give every visitor a session of its own.
  if (!getCookie(event, useRuntimeConfig(event).session.name ?? '')) return null
  const { secure } = await getUserSession(event)
  return typeof secure?.sid === 'string' ? secure.sid : null
}

/** The person who asks, or null for nobody. */
export async function findActor(event: H3Event): Promise<Actor | null> {
  const context = event.context as { actor?: Actor | null }
  if (context.actor === undefined) {
    const id = await sessionIdOf(event)
    context.actor = id ? await actorOfSession(id) : null
  }
  return context.actor
}

/** The person who asks; 401 for nobody. */
export async function requireActor(event: H3Event): Promise<Actor> {
  const actor = await findActor(event)
  if (!actor) throw notSignedIn()
  return actor
}

/** Signs a device in: a new row with a new id, the former one of this browser ended, the cookie's only key overwritten. */
export async function openSession(event: H3Event, userId: string): Promise<void> {
  const former = await sessionIdOf(event)
  if (former) await endSession(former)
  const now = new Date()
  const session = await Session.create({
    id: newSessionId(),
    userId,
    createdAt: now,
    lastSeenAt: now,
    expiresAt: new Date(now.getTime() + LIMITS.session.absolute),
    userAgent: (getHeader(event, 'user-agent') ?? '').slice(0, 255),
    ip: addressOf(event),
  })
  await setUserSession(event, { secure: { sid: session.id } })
}

/** Ends a session wherever it is open. */
export async function endSession(id: string): Promise<void> {
  await Session.update({ revokedAt: new Date() }, { where: { id, revokedAt: null } })
  revocations.emit({ kind: 'session', id })
}

/** Signs this device out. Harmless when nobody is signed in. */
export async function closeSession(event: H3Event): Promise<void> {
  const id = await sessionIdOf(event)
  if (!id) return
  await endSession(id)
  await clearUserSession(event)
}
