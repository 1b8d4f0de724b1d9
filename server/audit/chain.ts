/** One chain of entries: each holds the hash of the one before, and the lock of the head's row makes their order. */
import { QueryTypes, type Transaction } from 'sequelize'
import { hashOf } from '#shared/document/canonical'
import { AuditEntry, sequelize } from '../database'
import { auditEventSchema, type AuditEvent } from './events'
import { now } from '../utils/clock'

export interface ChainHead { seq: number, hash: string }

interface Link { seq: number, at: string, actorId: string | null, event: string, subject: unknown, data: unknown, previousHash: string }

const linkHash = (link: Link): string => hashOf(link)

async function head(transaction: Transaction): Promise<ChainHead> {
  const [row] = await sequelize.query<{ seq: number, hash: string }>('SELECT seq, hash FROM audit_head WHERE id = 1 FOR UPDATE', { type: QueryTypes.SELECT, transaction })
  if (!row) throw new Error('The head of the audit record is missing.')
  return { seq: Number(row.seq), hash: row.hash }
}

/** Writes entries in the transaction of what they record. Call it last: from here to COMMIT nobody else can write one. */
export async function recordAudit(transaction: Transaction, ...events: AuditEvent[]): Promise<ChainHead> {
  let { seq, hash } = await head(transaction)
  const at = now()
  for (const unchecked of events) {
    const event = auditEventSchema.parse(unchecked)
    const previousHash = hash
    seq += 1
    hash = linkHash({ seq, at: at.toISOString(), ...event, previousHash })
    await AuditEntry.create({ seq, at, actorId: event.actorId, event: event.event, subject: event.subject, data: event.data, previousHash, hash }, { transaction })
  }
  await sequelize.query('UPDATE audit_head SET seq = ?, hash = ? WHERE id = 1', { replacements: [seq, hash], transaction })
  return { seq, hash }
}

export type ChainReport = { whole: true, head: ChainHead } | { whole: false, seq: number, what: string }

const GENESIS = '0'.repeat(64)
const PAGE = 500

function linkProblem(entry: AuditEntry, seq: number, previousHash: string): string | null {
  if (Number(entry.seq) !== seq) return 'An entry is missing.'
  if (entry.previousHash !== previousHash) return 'The entry does not follow on the one before.'
  const { actorId, event, subject, data } = entry
  if (!auditEventSchema.safeParse({ event, actorId, subject, data }).success) return 'The entry is not one that this program writes.'
  const expected = linkHash({ seq, at: entry.at.toISOString(), actorId, event, subject, data, previousHash })
  return expected === entry.hash ? null : 'The entry was changed after it was written.'
}

/** Walks the whole chain. `expected` is a head that was signed earlier: an entry cut off or a chain rebuilt since then shows. */
export async function verifyAudit(expected?: ChainHead): Promise<ChainReport> {
  let previous = GENESIS
  let seq = 0
  for (;;) {
    const entries = await AuditEntry.findAll({ where: sequelize.literal(`seq > ${seq}`), order: [['seq', 'ASC']], limit: PAGE })
    for (const entry of entries) {
      seq += 1
      const what = linkProblem(entry, seq, previous)
      if (what) return { whole: false, seq, what }
      previous = entry.hash
      if (expected?.seq === seq && expected.hash !== entry.hash) return { whole: false, seq, what: 'The chain was rebuilt: a head that was signed earlier is not in it.' }
    }
    if (entries.length < PAGE) break
  }
  if (expected && expected.seq > seq) return { whole: false, seq, what: 'Entries at the end are missing.' }
  return { whole: true, head: { seq, hash: previous } }
}
