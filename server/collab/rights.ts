/** What a connection rests on: a session that goes on, and the right to see or edit this revision. Read for many at once. */
import { QueryTypes } from 'sequelize'
import { CLOSE, type CloseCode } from '../../shared/collab/messages'
import { LIMITS } from '../../shared/limits'
import type { Actor } from '../../shared/policies/actor'
import { mayDo, see, type RevisionFacts } from '../../shared/policies/revisions'
import type { Role } from '../../shared/types/api'
import type { RevisionState } from '../../shared/workflow/revision'
import { sequelize } from '../database'
import type { Mode } from './wire'
import type { Standing, Watch, Watched } from './rooms'

export interface RevisionStand { state: RevisionState, epoch: number, version: number, facts: RevisionFacts }

const select = <T extends object>(sql: string, ids: readonly string[]): Promise<T[]> => ids.length === 0
  ? Promise.resolve([])
  : sequelize.query<T>(sql, { replacements: [ids], type: QueryTypes.SELECT })

interface SessionRow {
  id: string, user_id: string, name: string, initials: string, organisation_id: string | null
  expires_at: Date, last_seen_at: Date, revoked_at: Date | null, disabled_at: Date | null, password_hash: string | null
}

const SESSIONS = `SELECT s.id, s.user_id, s.expires_at, s.last_seen_at, s.revoked_at, u.name, u.initials, u.organisation_id, u.disabled_at, u.password_hash
  FROM sessions s JOIN users u ON u.id = s.user_id WHERE s.id IN (?)`
const ROLES = 'SELECT user_id, role FROM user_roles WHERE user_id IN (?) ORDER BY position'

const goesOn = (row: SessionRow, now: number) => row.revoked_at === null && row.disabled_at === null && row.password_hash !== null
  && row.expires_at.getTime() > now && row.last_seen_at.getTime() + LIMITS.session.idle > now

function groupBy<T, V>(rows: readonly T[], key: (row: T) => string, value: (row: T) => V): Map<string, V[]> {
  const groups = new Map<string, V[]>()
  for (const row of rows) groups.set(key(row), [...groups.get(key(row)) ?? [], value(row)])
  return groups
}

/** The people behind those of the sessions that go on. */
export async function actorsOf(sessionIds: readonly string[], now = Date.now()): Promise<Map<string, Actor>> {
  const rows = (await select<SessionRow>(SESSIONS, sessionIds)).filter(row => goesOn(row, now))
  const roles = groupBy(await select<{ user_id: string, role: Role }>(ROLES, [...new Set(rows.map(row => row.user_id))]), row => row.user_id, row => row.role)
  return new Map(rows.map(row => [row.id, {
    id: row.user_id, name: row.name, initials: row.initials, roles: roles.get(row.user_id) ?? [], organisationId: row.organisation_id, sessionId: row.id,
  }]))
}

interface RevisionRow {
  id: string, state: RevisionState, author_id: string, checker_id: string | null
  version: number, epoch: number, project_id: string, client_id: string | null, archived_at: Date | null
}

const REVISIONS = `SELECT r.id, r.state, r.author_id, r.checker_id, r.version, d.epoch, p.id AS project_id, p.client_id, p.archived_at
  FROM revisions r JOIN revision_docs d ON d.revision_id = r.id JOIN sheets s ON s.id = r.sheet_id JOIN projects p ON p.id = s.project_id
  WHERE r.id IN (?)`
const MEMBERS = 'SELECT project_id, user_id, role FROM project_members WHERE project_id IN (?)'

type MemberRow = { project_id: string, user_id: string, role: 'member' | 'manager' }

/** Only what decides who sees and who edits; nothing else is asked of these facts here. */
function factsOf(row: RevisionRow, members: readonly MemberRow[]): RevisionFacts {
  const ids = (role: MemberRow['role']) => members.filter(member => member.role === role).map(member => member.user_id)
  return {
    state: row.state, authorId: row.author_id, checkerId: row.checker_id,
    project: { memberIds: ids('member'), managerIds: ids('manager'), clientId: row.client_id, archived: row.archived_at !== null },
    submitterId: null, checkedById: null, contributorIds: [], lines: 0, ticked: 0, openMustChange: 0,
    openElsewhere: false, hasLater: false, sheetIssued: false, hasPdf: false,
  }
}

export async function standsOf(revisionIds: readonly string[]): Promise<Map<string, RevisionStand>> {
  const rows = await select<RevisionRow>(REVISIONS, revisionIds)
  const members = groupBy(await select<MemberRow>(MEMBERS, [...new Set(rows.map(row => row.project_id))]), row => row.project_id, row => row)
  return new Map(rows.map(row => [row.id, {
    state: row.state, epoch: row.epoch, version: row.version, facts: factsOf(row, members.get(row.project_id) ?? []),
  }]))
}

export type Admission = { ok: true, mode: Mode } | { ok: false, code: CloseCode, reason: string }

const refuse = (code: CloseCode, reason: string): Admission => ({ ok: false, code, reason })

/**
 * What this person may have of this revision's socket.
 * @param wanted `document`: the draft itself, of the epoch that the page knows; `notices`: only to be told of changes
 */
export function admit(actor: Actor, stand: RevisionStand | undefined, wanted: { kind: 'notices' } | { kind: 'document', epoch: number }): Admission {
  if (!stand || !see(actor, stand.facts).may) return refuse(CLOSE.notFound, 'no such sheet')
  if (wanted.kind === 'notices') return { ok: true, mode: 'notices' }
  if (stand.state !== 'draft' || stand.epoch !== wanted.epoch) return refuse(CLOSE.frozen, 'not this draft')
  return { ok: true, mode: mayDo('edit', actor, stand.facts).may ? 'write' : 'read' }
}

/** Sessions in which somebody writes are in use, though no request of theirs comes in. */
async function touch(standings: readonly Standing[], now: number) {
  const active = standings.filter(({ connection }) => now - connection.contentAt < LIMITS.session.seenResolution).map(({ holder }) => holder.sessionId)
  if (active.length === 0) return
  await sequelize.query('UPDATE sessions SET last_seen_at = ? WHERE id IN (?) AND last_seen_at < ? AND revoked_at IS NULL', {
    replacements: [new Date(now), [...new Set(active)], new Date(now - LIMITS.session.seenResolution)],
  })
}

/** Looks again at all that is open, in a few queries whatever their number. */
export const watchRights: Watch = async (standings) => {
  const now = Date.now()
  const [actors, stands] = await Promise.all([
    actorsOf([...new Set(standings.map(({ holder }) => holder.sessionId))], now),
    standsOf([...new Set(standings.map(({ revisionId }) => revisionId))]),
  ])
  const lost: Watched['lost'] = new Map()
  for (const standing of standings) {
    const actor = actors.get(standing.holder.sessionId)
    if (!actor) {
      lost.set(standing, { code: CLOSE.signedOut, reason: 'signed out' })
      continue
    }
    const wanted = standing.epoch === null ? { kind: 'notices' as const } : { kind: 'document' as const, epoch: standing.epoch }
    const admission = admit(actor, stands.get(standing.revisionId), wanted)
    if (!admission.ok) lost.set(standing, { code: admission.code === CLOSE.notFound ? CLOSE.noRight : admission.code, reason: admission.reason })
    else if (admission.mode !== standing.mode) lost.set(standing, { code: CLOSE.noRight, reason: 'the right has changed' })
  }
  await touch(standings.filter(standing => !lost.has(standing)), now)
  return { lost, versions: new Map([...stands].map(([id, { version }]) => [id, version])) }
}
