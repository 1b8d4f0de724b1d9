/** Who is where in one sheet. States are made here from the session and the place that a client gives; clients only choose the place. */
import { placeSchema, presenceOf, type Place, type Presence as State } from '../../shared/collab/presence'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { awarenessFrame, readAwareness, type AwarenessEntry } from './frames'
import type { Holder } from './wire'

export interface Present {
  holder: Holder
  /** Takes part in the sheet, so that it is told of places. */
  follows: boolean
  send: (frame: Uint8Array) => void
}

/** A client says where it is, or (null) that it left; undefined: it says neither. */
function placeOf(state: unknown): Place | null | undefined {
  if (state === null) return null
  const place = placeSchema.safeParse(state)
  return place.success ? place.data : undefined
}

interface Stand { client: number, state: State | null }

export class Presence<T extends Present> {
  private readonly stands = new Map<T, Stand>()
  private readonly changed = new Map<number, State | null>()
  private timer: ReturnType<typeof setTimeout> | undefined
  private lastClock = 0

  /** @param ownerOf the person to whom a Yjs client id belongs in this document, if to any */
  constructor(private readonly everyone: () => Iterable<T>, private readonly ownerOf: (client: number) => string | undefined) {}

  /** Takes a client's awareness frame. What is not its own, too large or not a place is passed over. Throws if it cannot be read. */
  receive(connection: T, bytes: Uint8Array): void {
    const own = this.stands.get(connection)
    const entry = readAwareness(bytes, own?.client ?? null, COLLABORATION_LIMITS.presence)
    if (!entry || (!own && !this.mayUse(connection, entry.client))) return
    const place = placeOf(entry.state)
    if (place === undefined) return
    const { userId: id, name, initials } = connection.holder
    const state = place && presenceOf({ id, name, initials }, place)
    this.stands.set(connection, { client: entry.client, state })
    this.announce(entry.client, state)
    // Not before it has named itself: told of its own earlier place, which a dead connection left, it would go back there.
    if (!own) this.introduce(connection)
  }

  /** The first connection to name an id has it; the same person coming again takes it over. */
  private mayUse(connection: T, client: number): boolean {
    const owner = this.ownerOf(client)
    if (owner !== undefined && owner !== connection.holder.userId) return false
    for (const [other, stand] of this.stands) {
      if (stand.client !== client) continue
      if (other.holder.userId !== connection.holder.userId) return false
      this.stands.delete(other)
    }
    return true
  }

  private announce(client: number, state: State | null) {
    this.changed.set(client, state)
    this.timer ??= setTimeout(() => this.round(), COLLABORATION_LIMITS.presenceEvery)
  }

  /**
   * Clients take only what has a higher clock than they last saw of an id, and they remember that across connections
   * and restarts of the server. So the clocks are the server's own, and never stand still.
   */
  private clock(): number {
    this.lastClock = Math.max(this.lastClock + 1, Date.now())
    return this.lastClock
  }

  /** One round tells everyone what changed since the last. */
  private round() {
    this.timer = undefined
    const clock = this.clock()
    const entries = [...this.changed].map(([client, state]) => ({ client, clock, state }))
    this.changed.clear()
    for (const connection of this.everyone()) if (connection.follows) this.tell(connection, entries)
  }

  /** Nobody is told of their own place: an echo that is late would move them back. */
  private tell(connection: T, entries: readonly AwarenessEntry[]) {
    const own = this.stands.get(connection)?.client
    const others = entries.filter(({ client }) => client !== own)
    if (others.length > 0) connection.send(awarenessFrame(others))
  }

  /** Tells of everybody. */
  introduce(connection: T): void {
    const clock = this.clock()
    this.tell(connection, [...this.stands.values()].filter(({ state }) => state !== null).map(stand => ({ ...stand, clock })))
  }

  leave(connection: T): void {
    const stand = this.stands.get(connection)
    if (!stand) return
    this.stands.delete(connection)
    if (stand.state !== null) this.announce(stand.client, null)
  }

  end(): void {
    clearTimeout(this.timer)
    this.stands.clear()
    this.changed.clear()
  }
}
