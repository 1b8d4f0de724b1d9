/** Rooms in the test's own process, on the real database, with clients that talk to them without a network. */
import * as Y from 'yjs'
import { createSheetLog, type SheetLog } from '../../../server/collab/log'
import { Rooms, type Watch } from '../../../server/collab/rooms'
import type { Connection } from '../../../server/collab/connection'
import type { Mode, Wire } from '../../../server/collab/wire'
import { sequelize } from '../../../server/database'
import { readFrame } from '../../../server/collab/frames'
import { MESSAGE_DONE } from '../../../shared/collab/messages'
import type { Person } from '../../helpers/people'
import type { Draft } from './drafts'
import { answer, question, update } from './raw'
import { watcher } from './sheet'

export const allMay: Watch = () => Promise.resolve({ lost: new Map(), versions: new Map() })

/** The real log, with single functions replaced: for faults at a chosen moment. */
export function logWith(change: (real: SheetLog) => Partial<SheetLog>): SheetLog {
  const real = createSheetLog(sequelize)
  const bound: SheetLog = {
    load: id => real.load(id), append: (...given) => real.append(...given), since: (...given) => real.since(...given),
    clients: id => real.clients(id), heads: ids => real.heads(ids), fold: id => real.fold(id),
  }
  return { ...bound, ...change(bound) }
}

export const createRooms = (log: SheetLog = logWith(() => ({})), watch: Watch = allMay): Rooms => new Rooms(log, watch)

/** A client of the protocol: keeps a document, sends what is typed, answers what it is asked. */
export class LocalClient {
  readonly heard = { upTo: 0, closed: null as number | null, asked: 0, relayed: 0 }
  readonly watch = watcher(() => this.heard)
  readonly connection: Connection
  sent = 0

  constructor(rooms: Rooms, draft: Pick<Draft, 'revisionId' | 'epoch'>, person: Person, readonly doc = new Y.Doc(), mode: Mode = 'write') {
    const wire: Wire = {
      send: bytes => queueMicrotask(() => this.hear(bytes)),
      close: code => this.note(() => this.heard.closed = code),
      terminate: () => this.note(() => this.heard.closed = 1006),
      ping: () => undefined,
      waiting: () => 0,
    }
    this.connection = rooms.join({
      revisionId: draft.revisionId, mode, epoch: draft.epoch,
      holder: { sessionId: person.id, userId: person.id, name: person.name, initials: person.initials },
    }, wire)
    this.doc.on('update', this.send)
    this.connection.receive(question(this.doc))
  }

  private readonly send = (bytes: Uint8Array, origin: unknown) => {
    if (origin === this || this.heard.closed !== null) return
    this.sent++
    this.connection.receive(update(bytes))
  }

  private note(change: () => unknown) {
    change()
    this.watch.changed()
  }

  private hear(bytes: Uint8Array) {
    if (bytes[0] === MESSAGE_DONE) {
      const text = new TextDecoder().decode(bytes.slice(2))
      return this.note(() => this.heard.upTo = (JSON.parse(text) as { upTo: number }).upTo)
    }
    const frame = readFrame(bytes)
    if (frame.kind === 'question') {
      this.sent++
      this.connection.receive(answer(Y.encodeStateAsUpdate(this.doc, frame.vector)))
      this.note(() => this.heard.asked++)
    }
    if (frame.kind === 'answer' || frame.kind === 'update') {
      Y.applyUpdate(this.doc, frame.update, this)
      this.note(() => this.heard.relayed++)
    }
  }

  write(text: string): void {
    this.doc.transact(() => {
      const paragraph = new Y.XmlElement('paragraph')
      paragraph.insert(0, [new Y.XmlText(text)])
      this.doc.getXmlFragment('sheet').push([paragraph])
    })
  }

  plain() { return this.doc.getXmlFragment('sheet').toString() }

  saved() {
    return this.watch.wait(({ asked, upTo }) => asked > 0 && upTo >= this.sent, 'everything is committed')
  }

  closed() {
    return this.watch.wait(({ closed }) => closed !== null, 'closed')
  }

  leave(): void {
    this.doc.off('update', this.send)
    this.connection.over()
  }
}
