import { createHash, randomBytes } from 'node:crypto'
import type { Transaction } from 'sequelize'
import { LIMITS } from '#shared/limits'
import { OneTimeLink } from '../../database'
import type { LinkKind } from '../../database'
import { refusal } from '../../utils/errors'
import { newId } from '../../utils/ids'

const hashOf = (token: string): string => createHash('sha256').update(token).digest('hex')

const gone = () => refusal(404, { code: 'link_not_valid', field: 'token', help: 'This link has been used, has run out, or a newer one was sent. Ask for a new one.' })

/** A new link for a person; earlier ones of the kind stop working. The token is returned once and kept nowhere. */
export async function createLink(kind: LinkKind, userId: string, transaction: Transaction): Promise<{ id: string, token: string, expiresAt: Date }> {
  const now = new Date()
  await OneTimeLink.update({ usedAt: now }, { where: { kind, userId, usedAt: null }, transaction })
  const token = randomBytes(32).toString('base64url')
  const expiresAt = new Date(now.getTime() + LIMITS.links[kind])
  const { id } = await OneTimeLink.create({ id: newId(), kind, userId, tokenHash: hashOf(token), createdAt: now, expiresAt }, { transaction })
  return { id, token, expiresAt }
}

/** The link behind a token, if it still works. 404 otherwise. */
export async function findLink(kind: LinkKind, token: string): Promise<OneTimeLink> {
  const link = await OneTimeLink.findOne({ where: { kind, tokenHash: hashOf(token), usedAt: null } })
  if (!link || link.expiresAt <= new Date()) throw gone()
  return link
}

/** Spends the link; of two at once one is refused. Returns whose it is. */
export async function spendLink(kind: LinkKind, token: string, transaction: Transaction): Promise<string> {
  const link = await OneTimeLink.findOne({ where: { kind, tokenHash: hashOf(token) }, lock: transaction.LOCK.UPDATE, transaction })
  if (!link || link.usedAt || link.expiresAt <= new Date()) throw gone()
  await link.update({ usedAt: new Date() }, { transaction })
  return link.userId
}
