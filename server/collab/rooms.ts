/** All documents that are open in this process and everyone who is connected to them. */
import { CLOSE, type Changed, type CloseCode } from '../../shared/collab/messages'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { errorFields, log } from '../utils/log'
import type { Revocation } from '../utils/revocation'
import { Connection } from './connection'
import type { SheetLog } from './log'
import { Room, RoomClosed } from './room'
import type { Holder, Mode, Wire } from './wire'

/** `epoch`: of the draft that the page knows; null for one who only wants to be told of changes. */
export interface Admitted { revisionId: string, mode: Mode, holder: Holder, epoch: number | null }

/** Someone connected, and on what it rests. `version`: the revision's when last looked at, null before. */
export interface Standing extends Admitted { connection: Connection, version: number | null }

/** What has become of what connections rest on: those that may not stay as they are, and the revision's version for the others. */
export interface Watched { lost: Map<Standing, { code: CloseCode, reason: string }>, versions: Map<string, number> }
export type Watch = (standings: readonly Standing[]) => Promise<Watched>

interface OpenRoom { room: Room, loaded: Promise<void>, isRead: boolean, resting: ReturnType<typeof setTimeout> | undefined }

export class Rooms {
  private readonly open = new Map<string, OpenRoom>()
  private readonly standings = new Map<Connection, Standing>()
  private readonly timers: ReturnType<typeof setInterval>[] = []
  private watching = false
  private watchAgain = false
  private closing = false

  constructor(private readonly store: SheetLog, private readonly watch: Watch) {}

  get counts() {
    return { documents: this.open.size, connections: this.standings.size }
  }

  /** Starts to look after connections: pings, ended sessions, lost rights, freezes, what other processes committed. */
  start(): void {
    this.timers.push(
      setInterval(() => this.beat(), COLLABORATION_LIMITS.heartbeat),
      setInterval(() => void this.look(), COLLABORATION_LIMITS.watch),
    )
  }

  /** Lets someone in. Refusals close the socket with a code; the returned connection then is over. */
  join(admitted: Admitted, wire: Wire): Connection {
    const connection = new Connection(admitted.revisionId, admitted.mode, admitted.holder, wire, over => this.leave(over))
    if (this.closing) connection.end(CLOSE.tryAgain, 'restarting')
    else if (this.isCrowded(admitted)) connection.end(CLOSE.slowDown, 'too many pages open')
    else {
      this.standings.set(connection, { ...admitted, connection, version: null })
      if (admitted.mode !== 'notices') void this.enter(connection, admitted)
    }
    return connection
  }

  private isCrowded({ holder, revisionId }: Admitted): boolean {
    const own = [...this.standings.values()].filter(standing => standing.holder.userId === holder.userId)
    return own.length >= COLLABORATION_LIMITS.connectionsPerPerson
      || own.filter(standing => standing.revisionId === revisionId).length >= COLLABORATION_LIMITS.connectionsPerPersonAndSheet
  }

  private async enter(connection: Connection, admitted: Admitted) {
    try {
      const room = await this.room(admitted.revisionId)
      if (connection.isOver) return
      if (room.isDropped) return connection.end(CLOSE.tryAgain, 'the document is read again')
      if (admitted.epoch !== room.epoch) return connection.end(CLOSE.frozen, 'another epoch')
      connection.enter(room)
    }
    catch (error) {
      if (error instanceof RoomClosed) return connection.end(error.code, error.message)
      log('error', 'collab.open_failed', { revision: admitted.revisionId, ...errorFields(error) })
      connection.end(CLOSE.tryAgain, 'could not be read')
    }
    finally {
      if (connection.isOver) this.restIfEmpty(this.open.get(admitted.revisionId)?.room)
    }
  }

  /** The one instance of a document, brought up to date. A room stays findable until nothing of it is unsaved. */
  private async room(revisionId: string): Promise<Room> {
    const found = this.open.get(revisionId)
    if (!found) {
      const made = this.make(revisionId)
      await made.loaded
      return made.room
    }
    clearTimeout(found.resting)
    await found.loaded
    const heads = await this.store.heads([revisionId])
    await found.room.catchUp(heads.get(revisionId))
    return found.room.isDropped ? this.room(revisionId) : found.room
  }

  private make(revisionId: string): OpenRoom {
    const room = new Room(revisionId, this.store, dropped => this.forget(dropped))
    const made: OpenRoom = { room, loaded: room.load(), isRead: false, resting: undefined }
    this.open.set(revisionId, made)
    // Whoever waits for it hears of a failure; the room itself must not be found again.
    made.loaded.then(() => { made.isRead = true }, () => this.forget(room))
    return made
  }

  private forget(room: Room) {
    const found = this.open.get(room.revisionId)
    if (found?.room !== room) return
    clearTimeout(found.resting)
    this.open.delete(room.revisionId)
  }

  private leave(connection: Connection) {
    this.standings.delete(connection)
    this.restIfEmpty(this.open.get(connection.revisionId)?.room)
  }

  private restIfEmpty(room: Room | undefined) {
    const found = room && this.open.get(room.revisionId)
    if (!found || found.room !== room || room.members.size > 0) return
    clearTimeout(found.resting)
    found.resting = setTimeout(() => void this.putAway(found), COLLABORATION_LIMITS.idle)
  }

  private async putAway(found: OpenRoom) {
    await found.loaded.catch(() => undefined)
    await found.room.drained()
    const isCurrent = this.open.get(found.room.revisionId) === found
    if (!isCurrent || found.room.members.size > 0 || this.isAwaited(found.room.revisionId)) return
    await found.room.rest()
    // Looked at again after each wait: somebody may have come in, and then it stays.
    if (found.room.members.size > 0 || !found.room.isSettled || this.isAwaited(found.room.revisionId)) return
    found.room.drop(CLOSE.tryAgain, 'put away')
  }

  /** Somebody is connected to the document and may be on the way into its room. */
  private isAwaited(revisionId: string): boolean {
    return [...this.standings.values()].some(standing => standing.revisionId === revisionId && standing.mode !== 'notices')
  }

  /** Tells everyone at this revision that something changed. */
  notify(revisionId: string, what: Changed['what']): void {
    for (const standing of this.standings.values()) {
      if (standing.revisionId !== revisionId) continue
      standing.version = null
      standing.connection.changed(what)
    }
  }

  /** A right has ended in this process. What follows from it is read from the database, at once. */
  revoke(revocation: Revocation): void {
    if (revocation.kind === 'session') {
      for (const standing of [...this.standings.values()]) {
        if (standing.holder.sessionId === revocation.id) standing.connection.end(CLOSE.signedOut, 'signed out')
      }
    }
    void this.look()
  }

  private beat() {
    for (const connection of [...this.standings.keys()]) connection.beat()
  }

  /** Looks at what everything open rests on. Never two at once: asked meanwhile, it looks once more. */
  async look(): Promise<void> {
    this.watchAgain = true
    if (this.watching) return
    this.watching = true
    try {
      while (this.watchAgain && this.standings.size > 0) {
        this.watchAgain = false
        await this.lookOnce()
      }
    }
    catch (error) {
      // A database that is away is not a lost right.
      log('warn', 'collab.watch_failed', errorFields(error))
    }
    finally {
      this.watching = false
    }
  }

  private async lookOnce() {
    const { lost, versions } = await this.watch([...this.standings.values()])
    for (const standing of this.standings.values()) this.tellVersion(standing, versions.get(standing.revisionId))
    for (const [standing, { code, reason }] of lost) standing.connection.end(code, reason)
    const rooms = [...this.open.values()].filter(({ isRead }) => isRead).map(({ room }) => room)
    const heads = await this.store.heads(rooms.map(room => room.revisionId))
    for (const room of rooms) await room.catchUp(heads.get(room.revisionId))
  }

  /** Another process has changed the revision. */
  private tellVersion(standing: Standing, version: number | undefined) {
    if (version === undefined || version === standing.version) return
    if (standing.version !== null) standing.connection.changed('state')
    standing.version = version
  }

  /** Lets what was received be committed, then sends everyone away; they come again by themselves. */
  async close(): Promise<void> {
    this.closing = true
    for (const timer of this.timers) clearInterval(timer)
    const rooms = [...this.open.values()].map(({ room }) => room)
    await Promise.race([
      Promise.all(rooms.map(room => room.drained())),
      new Promise(resolve => setTimeout(resolve, COLLABORATION_LIMITS.lastCommits).unref()),
    ])
    for (const room of rooms) room.drop(CLOSE.tryAgain, 'restarting')
    for (const connection of [...this.standings.keys()]) connection.end(CLOSE.tryAgain, 'restarting')
  }
}
