/**
 * One draft in memory. `committed` is what the log holds and the only thing that others ever see; `working` is that
 * and what is on its way to the log. An update is applied to `working`, committed, and only then relayed and
 * acknowledged, so whatever anybody holds of another person's is in the log.
 */
import * as Y from 'yjs'
import { CLOSE, type Changed, type CloseCode, type Refused } from '../../shared/collab/messages'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { errorFields, log } from '../utils/log'
import { Committer } from './committer'
import { updateFrame } from './frames'
import { inspectUpdate, isTooDeep } from './inspect'
import type { Entry, Head, LogRow, SheetLog } from './log'
import { Presence, type Present } from './presence'

export interface RoomMember extends Present {
  /** More of the queue is committed. */
  settled: () => void
  changed: (what: Changed['what']) => void
  end: (code: CloseCode, reason: string) => void
}

export type Received =
  /** All of it is in `working`; it is committed once the queue has been up to `position`. */
  | { kind: 'taken', position: number }
  /** It builds on something that is not there. */
  | { kind: 'missing' }
  | { kind: 'refused', refused: Refused }

export interface QueuedEntry extends Entry { from: RoomMember | null }

export class RoomClosed extends Error {
  constructor(readonly code: CloseCode, reason: string) {
    super(reason)
    this.name = 'RoomClosed'
  }
}

const refuse = (code: Refused['code'], help: string): Received => ({ kind: 'refused', refused: { code, help } })

export class Room {
  readonly members = new Set<RoomMember>()
  readonly presence: Presence<RoomMember>
  private committed = new Y.Doc()
  private working = new Y.Doc()
  private clients = new Map<number, string>()
  private readonly committer: Committer
  private size = 0
  private head: Head = { state: 'draft', epoch: 0, nextSeq: 1 }
  private unfolded = 0
  private closed: { code: CloseCode, reason: string } | null = null

  constructor(readonly revisionId: string, private readonly store: SheetLog, private readonly onDropped: (room: Room) => void) {
    this.presence = new Presence<RoomMember>(() => this.members, client => this.clients.get(client))
    this.committer = new Committer({
      append: entries => this.store.append(this.revisionId, this.head.epoch, this.head.nextSeq - 1, entries),
      committed: (entries, first, foreign) => this.onCommitted(entries, first, foreign),
      gone: (code, reason) => this.drop(code, reason),
    })
  }

  get epoch() { return this.head.epoch }
  get isDropped() { return this.closed !== null }
  /** Nothing on its way to the log. */
  get isSettled() { return this.committer.isIdle }
  /** Position of the queue up to which all is committed. */
  get settled() { return this.committer.settled }

  /** Reads the document. Nothing may be asked of the room before; a failed load never becomes an empty document. */
  async load(): Promise<void> {
    const loaded = await this.store.load(this.revisionId)
    if (!loaded) throw new RoomClosed(CLOSE.notFound, 'no such sheet')
    if (loaded.state !== 'draft') throw new RoomClosed(CLOSE.frozen, 'not a draft')
    Y.applyUpdate(this.committed, loaded.update)
    Y.applyUpdate(this.working, loaded.update)
    this.clients = loaded.clients
    this.head = { state: loaded.state, epoch: loaded.epoch, nextSeq: loaded.nextSeq }
    this.unfolded = loaded.rows
    this.size = loaded.update.length
  }

  /** State vector of what is committed: whoever has more is asked for it. */
  vector(): Uint8Array {
    return Y.encodeStateVector(this.committed)
  }

  /** What a client with that state vector lacks of what is committed. */
  answer(vector: Uint8Array): Uint8Array {
    return Y.encodeStateAsUpdate(this.committed, vector)
  }

  /** Whether an update holds nothing that is not committed already. */
  holdsNothingNew(update: Uint8Array): boolean {
    return update.length <= 2 || Y.snapshotContainsUpdate(Y.snapshot(this.committed), update)
  }

  receive(update: Uint8Array, from: RoomMember): Received {
    const { userId } = from.holder
    const inspection = inspectUpdate(update, this.working, client => this.clients.get(client), userId)
    if (!inspection.ok) return { kind: 'refused', refused: inspection.refused }
    const { clients, containers } = inspection.inspected
    if (clients.size > 0 && this.isFull(update.length)) {
      return refuse('sheet_full', 'The sheet has reached its greatest size. Divide it into two.')
    }

    const emitted = this.apply(update)
    if (emitted === null) return refuse('malformed', 'The server could not apply the edit.')
    if (isTooDeep(this.working, containers)) {
      this.rebuild()
      return refuse('too_deep', 'The edit nests elements deeper than a sheet can.')
    }
    const complete = this.dropIncomplete()
    for (const bytes of emitted) this.enqueue(bytes, from, clients)
    return complete ? { kind: 'taken', position: this.committer.position } : { kind: 'missing' }
  }

  /** Applies to `working` and gives what was new in it; null if Yjs could not, and then nothing of it stays. */
  private apply(update: Uint8Array): Uint8Array[] | null {
    const emitted: Uint8Array[] = []
    const collect = (bytes: Uint8Array) => emitted.push(bytes)
    this.working.on('update', collect)
    try {
      Y.applyUpdate(this.working, update)
      return emitted
    }
    catch {
      this.rebuild()
      return null
    }
    finally {
      this.working.off('update', collect)
    }
  }

  /** What builds on something absent is let go: Yjs would keep it for ever and try it again with every update. */
  private dropIncomplete(): boolean {
    const { store } = this.working
    const complete = store.pendingStructs === null && store.pendingDs === null
    store.pendingStructs = null
    store.pendingDs = null
    return complete
  }

  private enqueue(bytes: Uint8Array, from: RoomMember, clients: ReadonlySet<number>) {
    const newClients = [...clients].filter(client => !this.clients.has(client) && Y.getState(this.working.store, client) > 0)
    for (const client of newClients) this.clients.set(client, from.holder.userId)
    this.size += bytes.length
    this.committer.enqueue({ bytes, userId: from.holder.userId, newClients, from })
  }

  /** `working` afresh, after something was applied to it that must not stay. */
  private rebuild() {
    this.working.destroy()
    this.working = new Y.Doc()
    Y.applyUpdate(this.working, Y.encodeStateAsUpdate(this.committed))
    for (const entry of this.committer.waiting) Y.applyUpdate(this.working, entry.bytes)
  }

  /** The sum of what came in is an upper bound; the real size is only measured when that bound is reached. */
  private isFull(more: number): boolean {
    if (this.size + more <= COLLABORATION_LIMITS.document) return false
    this.size = Y.encodeStateAsUpdate(this.working).length
    return this.size + more > COLLABORATION_LIMITS.document
  }

  private onCommitted(entries: readonly QueuedEntry[], first: number, foreign: readonly LogRow[]) {
    this.takeForeign(foreign)
    for (const entry of entries) {
      Y.applyUpdate(this.committed, entry.bytes)
      this.relay(entry.bytes, entry.from)
    }
    this.head.nextSeq = first + entries.length
    this.unfolded += entries.length
    for (const member of this.members) member.settled()
    if (this.unfolded >= COLLABORATION_LIMITS.foldAfterRows) void this.fold()
  }

  /** What another process committed to the same document. */
  private takeForeign(rows: readonly LogRow[]) {
    for (const row of rows) {
      Y.applyUpdate(this.committed, row.bytes)
      Y.applyUpdate(this.working, row.bytes)
      this.relay(row.bytes, null)
    }
  }

  private relay(bytes: Uint8Array, from: RoomMember | null) {
    const frame = updateFrame(bytes)
    for (const member of this.members) if (member !== from && member.follows) member.send(frame)
  }

  /** Compares with the document's row, read a moment ago: frozen meanwhile, or written to by another process. */
  async catchUp(head: Head | undefined): Promise<void> {
    if (this.isDropped) return
    if (!head || head.state !== 'draft' || head.epoch !== this.head.epoch) return this.drop(CLOSE.frozen, 'no longer a draft')
    if (head.nextSeq <= this.head.nextSeq || !this.committer.isIdle) return
    const known = this.head.nextSeq - 1
    const [rows, clients] = await Promise.all([this.store.since(this.revisionId, known), this.store.clients(this.revisionId)])
    // An own commit meanwhile has taken them along.
    if (this.isDropped || this.head.nextSeq - 1 !== known || !this.committer.isIdle) return
    if (rows === null || rows.length < head.nextSeq - 1 - known) return this.drop(CLOSE.tryAgain, 'the log was folded')
    for (const [client, userId] of clients) this.clients.set(client, userId)
    this.takeForeign(rows)
    this.head.nextSeq += rows.length
    this.unfolded += rows.length
  }

  /** Folds a long log into one snapshot. */
  private async fold(): Promise<void> {
    this.unfolded = 0
    await this.store.fold(this.revisionId).catch((error: unknown) => {
      log('warn', 'collab.fold_failed', { revision: this.revisionId, ...errorFields(error) })
    })
  }

  /** The last one has gone: a log that has grown is folded, so that the next opening is quick. */
  async rest(): Promise<void> {
    if (this.unfolded >= COLLABORATION_LIMITS.foldAtRestRows) await this.fold()
  }

  /** Ends the room; whoever comes next reads the document from the log again. */
  drop(code: CloseCode, reason: string): void {
    if (this.closed) return
    this.closed = { code, reason }
    this.committer.stop()
    this.presence.end()
    this.onDropped(this)
    for (const member of [...this.members]) member.end(code, reason)
    this.members.clear()
    this.committed.destroy()
    this.working.destroy()
  }

  /** Resolves when all that was received is committed, or the room is gone. */
  drained(): Promise<void> {
    return this.committer.drained()
  }
}
