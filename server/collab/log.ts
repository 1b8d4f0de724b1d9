/**
 * The log of a document in the database: what has been committed, in order. `seq` is given under the lock of the
 * document's row and that lock is held until COMMIT, so rows appear in the order of their numbers and without gaps.
 */
import { QueryTypes, Transaction, type Sequelize } from 'sequelize'
import * as Y from 'yjs'
import type { RevisionState } from '../../shared/workflow/revision'

export interface Head { state: RevisionState, epoch: number, nextSeq: number }
export interface LogRow { seq: number, userId: string, bytes: Uint8Array }
export interface Loaded extends Head {
  /** The whole document as one update. */
  update: Uint8Array
  /** Rows of the log that are not in a snapshot. */
  rows: number
  clients: Map<number, string>
}
export interface Entry { bytes: Uint8Array, userId: string, newClients: readonly number[] }
export type Appended =
  /** `first`: number of the first entry; `foreign`: what others committed since `knownSeq`. */
  | { kind: 'committed', first: number, foreign: LogRow[] }
  | { kind: 'frozen' }
  /** A client id that came with these entries already belongs to another person. */
  | { kind: 'taken', client: number }

export interface SheetLog {
  load: (revisionId: string) => Promise<Loaded | null>
  append: (revisionId: string, epoch: number, knownSeq: number, entries: readonly Entry[]) => Promise<Appended>
  /** Rows after `seq`; null when some of them have already been folded into a snapshot. */
  since: (revisionId: string, seq: number) => Promise<LogRow[] | null>
  /** To whom the Yjs client ids of a document belong. */
  clients: (revisionId: string) => Promise<Map<number, string>>
  heads: (revisionIds: readonly string[]) => Promise<Map<string, Head>>
  fold: (revisionId: string) => Promise<void>
}

/** The log does not hold what the document's row says. Never opened as if it were shorter. */
export class DamagedLog extends Error {
  constructor(revisionId: string, what: string) {
    super(`The log of revision ${revisionId} ${what}.`)
    this.name = 'DamagedLog'
  }
}

interface StoredRow { seq: number, user_id: string, bytes: Buffer }
interface StoredHead { revision_id: string, state: RevisionState, epoch: number, next_seq: number }

const toRow = (row: StoredRow): LogRow => ({ seq: row.seq, userId: row.user_id, bytes: new Uint8Array(row.bytes) })
const toHead = (row: StoredHead): Head => ({ state: row.state, epoch: row.epoch, nextSeq: row.next_seq })

/** All in one transaction: the document that drops what was deleted is several times smaller than the merged updates. */
export function mergeIntoDocument(updates: readonly Uint8Array[]): Y.Doc {
  const doc = new Y.Doc()
  doc.transact(() => updates.forEach(update => Y.applyUpdate(doc, update)))
  return doc
}

function isWithoutGap(rows: readonly { seq: number }[], first: number, next: number): boolean {
  return rows.length === next - first && rows.every((row, i) => row.seq === first + i)
}

class DatabaseLog implements SheetLog {
  constructor(private readonly database: Sequelize) {}

  private select<T extends object>(sql: string, replacements: unknown[], transaction?: Transaction): Promise<T[]> {
    return this.database.query<T>(sql, { replacements, type: QueryTypes.SELECT, transaction })
  }

  /** One consistent view: folding meanwhile neither hides rows nor shows them twice. */
  private inOneView<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
    return this.database.transaction({ isolationLevel: Transaction.ISOLATION_LEVELS.REPEATABLE_READ }, work)
  }

  private async readAll(revisionId: string, transaction: Transaction) {
    const [head] = await this.select<StoredHead>('SELECT revision_id, state, epoch, next_seq FROM revision_docs WHERE revision_id = ?', [revisionId], transaction)
    if (!head) return null
    const [snapshot] = await this.select<{ seq: number, bytes: Buffer }>(
      'SELECT seq, bytes FROM revision_snapshots WHERE revision_id = ? ORDER BY seq DESC LIMIT 1', [revisionId], transaction)
    const folded = snapshot?.seq ?? 0
    const rows = await this.select<StoredRow>(
      'SELECT seq, user_id, bytes FROM revision_updates WHERE revision_id = ? AND seq > ? ORDER BY seq', [revisionId, folded], transaction)
    if (!isWithoutGap(rows, folded + 1, head.next_seq)) throw new DamagedLog(revisionId, `ends before or skips a number below ${head.next_seq}`)
    const updates = rows.map(row => new Uint8Array(row.bytes))
    return { head: toHead(head), folded, rows, updates: snapshot ? [new Uint8Array(snapshot.bytes), ...updates] : updates }
  }

  async load(revisionId: string): Promise<Loaded | null> {
    return this.inOneView(async (transaction) => {
      const stored = await this.readAll(revisionId, transaction)
      if (!stored) return null
      const clients = await this.clients(revisionId, transaction)
      const doc = mergeIntoDocument(stored.updates)
      const incomplete = doc.store.pendingStructs !== null || doc.store.pendingDs !== null
      const update = Y.encodeStateAsUpdate(doc)
      doc.destroy()
      if (incomplete) throw new DamagedLog(revisionId, 'lacks an update that a later one builds on')
      return { ...stored.head, update, rows: stored.rows.length, clients }
    })
  }

  async clients(revisionId: string, transaction?: Transaction): Promise<Map<number, string>> {
    const rows = await this.select<{ client_id: number, user_id: string }>(
      'SELECT client_id, user_id FROM yjs_clients WHERE revision_id = ?', [revisionId], transaction)
    return new Map(rows.map(row => [Number(row.client_id), row.user_id]))
  }

  /** One try, one transaction. Entries are committed together or not at all. */
  async append(revisionId: string, epoch: number, knownSeq: number, entries: readonly Entry[]): Promise<Appended> {
    const transaction = await this.database.transaction()
    try {
      const outcome = await this.appendIn(transaction, revisionId, epoch, knownSeq, entries)
      if (outcome.kind === 'committed') await transaction.commit()
      else await transaction.rollback()
      return outcome
    }
    catch (error) {
      // After a failed COMMIT or a lost connection there is nothing left to roll back, and that is not the news.
      await transaction.rollback().catch(() => undefined)
      throw error
    }
  }

  private async appendIn(transaction: Transaction, revisionId: string, epoch: number, knownSeq: number, entries: readonly Entry[]): Promise<Appended> {
    const [head] = await this.select<StoredHead>(
      'SELECT revision_id, state, epoch, next_seq FROM revision_docs WHERE revision_id = ? FOR UPDATE', [revisionId], transaction)
    if (!head || head.state !== 'draft' || head.epoch !== epoch) return { kind: 'frozen' }
    const taken = await this.bindClients(transaction, revisionId, entries)
    if (taken !== null) return { kind: 'taken', client: taken }

    const foreign = knownSeq + 1 < head.next_seq
      ? await this.select<StoredRow>('SELECT seq, user_id, bytes FROM revision_updates WHERE revision_id = ? AND seq > ? ORDER BY seq FOR UPDATE', [revisionId, knownSeq], transaction)
      : []
    if (!isWithoutGap(foreign, knownSeq + 1, head.next_seq)) throw new DamagedLog(revisionId, `was folded past number ${knownSeq + 1} under an open document`)

    await this.insertRows(transaction, revisionId, epoch, head.next_seq, entries)
    await this.insertContributors(transaction, revisionId, entries)
    await this.database.query('UPDATE revision_docs SET next_seq = ? WHERE revision_id = ?',
      { replacements: [head.next_seq + entries.length, revisionId], transaction })
    return { kind: 'committed', first: head.next_seq, foreign: foreign.map(toRow) }
  }

  private async bindClients(transaction: Transaction, revisionId: string, entries: readonly Entry[]): Promise<number | null> {
    const wanted = new Map(entries.flatMap(entry => entry.newClients.map(client => [client, entry.userId] as const)))
    if (wanted.size === 0) return null
    const rows = [...wanted].map(([client, userId]) => [revisionId, client, userId, new Date()])
    await this.database.query(
      `INSERT IGNORE INTO yjs_clients (revision_id, client_id, user_id, created_at) VALUES ${rows.map(() => '(?)').join(', ')}`,
      { replacements: rows, transaction })
    const bound = await this.select<{ client_id: number, user_id: string }>(
      'SELECT client_id, user_id FROM yjs_clients WHERE revision_id = ? AND client_id IN (?) FOR UPDATE', [revisionId, [...wanted.keys()]], transaction)
    const other = bound.find(row => wanted.get(Number(row.client_id)) !== row.user_id)
    return other ? Number(other.client_id) : null
  }

  private async insertRows(transaction: Transaction, revisionId: string, epoch: number, first: number, entries: readonly Entry[]) {
    const rows = entries.map((entry, i) => [revisionId, first + i, epoch, entry.userId, Buffer.from(entry.bytes), new Date()])
    await this.database.query(
      `INSERT INTO revision_updates (revision_id, seq, epoch, user_id, bytes, created_at) VALUES ${rows.map(() => '(?)').join(', ')}`,
      { replacements: rows, transaction })
  }

  /** Whoever writes is a contributor from the same COMMIT on, also one who had only inherited it. */
  private async insertContributors(transaction: Transaction, revisionId: string, entries: readonly Entry[]) {
    const rows = [...new Set(entries.map(entry => entry.userId))].sort().map(userId => [revisionId, userId, false, new Date()])
    await this.database.query(
      `INSERT INTO contributors (revision_id, user_id, inherited, first_at) VALUES ${rows.map(() => '(?)').join(', ')} ON DUPLICATE KEY UPDATE inherited = FALSE`,
      { replacements: rows, transaction })
  }

  async since(revisionId: string, seq: number): Promise<LogRow[] | null> {
    const rows = await this.select<StoredRow>(
      'SELECT seq, user_id, bytes FROM revision_updates WHERE revision_id = ? AND seq > ? ORDER BY seq', [revisionId, seq])
    return isWithoutGap(rows, seq + 1, seq + 1 + rows.length) ? rows.map(toRow) : null
  }

  async heads(revisionIds: readonly string[]): Promise<Map<string, Head>> {
    if (revisionIds.length === 0) return new Map()
    const rows = await this.select<StoredHead>('SELECT revision_id, state, epoch, next_seq FROM revision_docs WHERE revision_id IN (?)', [revisionIds])
    return new Map(rows.map(row => [row.revision_id, toHead(row)]))
  }

  /**
   * Folds the log into one snapshot. The snapshot is committed first; then exactly the rows that are in it go. A halt
   * in between leaves rows that are in both, which changes nothing. Needs no lock: rows never change, and those that
   * come meanwhile have higher numbers.
   */
  async fold(revisionId: string): Promise<void> {
    const stored = await this.inOneView(transaction => this.readAll(revisionId, transaction))
    if (!stored || stored.rows.length === 0) return
    const doc = mergeIntoDocument(stored.updates)
    const bytes = Buffer.from(Y.encodeStateAsUpdate(doc))
    doc.destroy()
    const seqs = stored.rows.map(row => row.seq)
    const last = seqs.at(-1)
    await this.database.query(
      'INSERT INTO revision_snapshots (revision_id, seq, bytes, created_at) VALUES (?) ON DUPLICATE KEY UPDATE seq = seq',
      { replacements: [[revisionId, last, bytes, new Date()]] })
    // Rows up to the former snapshot are those that a halt left behind.
    await this.database.query('DELETE FROM revision_updates WHERE revision_id = ? AND (seq <= ? OR seq IN (?))', { replacements: [revisionId, stored.folded, seqs] })
    await this.database.query('DELETE FROM revision_snapshots WHERE revision_id = ? AND seq < ?', { replacements: [revisionId, last] })
  }
}

export const createSheetLog = (database: Sequelize): SheetLog => new DatabaseLog(database)
