/** Who is where in one sheet. States are made here from the session and the place that a client gives; clients only choose the place. */
import { placeSchema, presenceOf, type Place } from '../../shared/collab/presence'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { awarenessFrame, readAwareness, type AwarenessEntry } from './frames'
import type { Holder } from './wire'

export interface Present {
  holder: Holder
  /** Takes part in the sheet, so that it is told of places. */
  follows: boolean
  send: (frame: Uint8Array) => void
}

/** A client says where it is, or (null) that it left. */
function placeOf(state: unknown): Place | null | undefined {
  if (state === null) return null
  const place = placeSchema.safeParse(state)
  return place.success ? place.data : undefined
}

export class Presence<T extends Present> {
  private readonly entries = new Map<T, AwarenessEntry>()
  private readonly changed = new Map<number, AwarenessEntry>()
  private timer: ReturnType<typeof setTimeout> | undefined

  /** @param ownerOf the person to whom a Yjs client id belongs in this document, if to any */
  constructor(private readonly everyone: () => Iterable<T>, private readonly ownerOf: (client: number) => string | undefined) {}

  /** Takes a client's awareness frame. What is not its own, too large or not a place is passed over. Throws if it cannot be read. */
  receive(connection: T, bytes: Uint8Array): void {
    const own = this.entries.get(connection)
    const entry = readAwareness(bytes, own?.client ?? null, COLLABORATION_LIMITS.presence)
    if (!entry || (!own && !this.mayUse(connection, entry.client))) return
    const place = placeOf(entry.state)
    if (place === undefined) return
    const { userId: id, name, initials } = connection.holder
    const state = place && presenceOf({ id, name, initials }, place)
    this.tell(connection, { ...entry, state })
  }

  /** The first connection to name an id has it; the same person coming again takes it over. */
  private mayUse(connection: T, client: number): boolean {
    const owner = this.ownerOf(client)
    if (owner !== undefined && owner !== connection.holder.userId) return false
    for (const [other, entry] of this.entries) {
      if (entry.client !== client) continue
      if (other.holder.userId !== connection.holder.userId) return false
      this.entries.delete(other)
    }
    return true
  }

  private tell(connection: T, entry: AwarenessEntry) {
    this.entries.set(connection, entry)
    this.announce(entry)
  }

  private announce(entry: AwarenessEntry) {
    this.changed.set(entry.client, entry)
    this.timer ??= setTimeout(() => this.round(), COLLABORATION_LIMITS.presenceEvery)
  }

  /** One round tells everyone what changed since the last, its sender too: the provider needs to hear something every 30 s. */
  private round() {
    this.timer = undefined
    const frame = awarenessFrame([...this.changed.values()])
    this.changed.clear()
    for (const connection of this.everyone()) if (connection.follows) connection.send(frame)
  }

  /** Everybody's place, for one who comes new or asks. */
  all(): Uint8Array {
    return awarenessFrame([...this.entries.values()].filter(entry => entry.state !== null))
  }

  leave(connection: T): void {
    const entry = this.entries.get(connection)
    if (!entry) return
    this.entries.delete(connection)
    if (entry.state !== null) this.announce({ ...entry, state: null })
  }

  end(): void {
    clearTimeout(this.timer)
    this.entries.clear()
    this.changed.clear()
  }
}
