import { Op } from 'sequelize'
import { LIMITS } from '#shared/limits'
import type { Actor } from '#shared/policies/actor'
import type { DeviceView } from '#shared/types/people'
import { Session } from '../../database'
import { presentDevice } from '../../presenters/people'
import { notFound } from '../../utils/errors'
import { revocations } from '../../utils/revocation'

const open = (userId: string) => {
  const now = new Date()
  return { userId, revokedAt: null, expiresAt: { [Op.gt]: now }, lastSeenAt: { [Op.gt]: new Date(now.getTime() - LIMITS.session.idle) } }
}

export async function listDevices(actor: Actor): Promise<DeviceView[]> {
  const sessions = await Session.findAll({ where: open(actor.id), order: [['lastSeenAt', 'DESC'], ['id', 'ASC']] })
  return sessions.map(session => presentDevice(session, actor.sessionId))
}

/** Signs one's own device out, wherever it is. */
export async function endDevice(actor: Actor, sessionId: string): Promise<void> {
  const [ended] = await Session.update({ revokedAt: new Date() }, { where: { ...open(actor.id), id: sessionId } })
  if (ended === 0) throw notFound('This device is signed out already.')
  revocations.emit({ kind: 'session', id: sessionId })
}
