/** One open socket: counts what comes in, lets it through in the right order, and tells its client what is committed. */
import * as Y from 'yjs'
import {
  CLOSE, MESSAGE_CHANGED, MESSAGE_DONE, MESSAGE_REFUSED, ownMessage, type Changed, type CloseCode, type Refused,
} from '../../shared/collab/messages'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { log } from '../utils/log'
import { Allowance } from './allowance'
import { answerFrame, carriesContent, questionFrame, readFrame, type Frame } from './frames'
import type { Received, Room, RoomMember } from './room'
import type { Holder, Mode, Wire } from './wire'

/** A received frame's number and the queue's position up to which it waits; null: it builds on something absent. */
interface Mark { frame: number, position: number | null }

const CLOSE_AFTER: Partial<Record<Refused['code'], CloseCode>> = {
  too_large: CLOSE.refused, sheet_full: CLOSE.refused, too_deep: CLOSE.refused, not_sheet: CLOSE.refused, not_yours: CLOSE.noRight, malformed: CLOSE.malformed,
}
const READ_ONLY: Refused = { code: 'read_only', help: 'You may read this sheet, not edit it.' }

export class Connection implements RoomMember {
  follows = false
  isOver = false
  private room: Room | null = null
  private alive = true
  /** Content frames received, and up to which of them all are committed. */
  private received = 0
  private upTo = 0
  private marks: Mark[] = []
  /** When content last came from here, so that a session in which somebody writes is one in use. */
  contentAt = 0
  /** Everything, until the room is there; then Update frames, until the client has answered. */
  private held: { bytes: Uint8Array, frame: number }[] = []
  private heldBytes = 0
  private answered = false
  private gaps = 0
  private deadline: ReturnType<typeof setTimeout> | undefined
  private readonly allowance = new Allowance()

  constructor(readonly revisionId: string, readonly mode: Mode, readonly holder: Holder, private readonly wire: Wire, private readonly onOver: (connection: Connection) => void) {}

  /** The room is read: ask the client for all that is not in it, always, since offline edits come back no other way. */
  enter(room: Room): void {
    if (this.isOver) return
    this.room = room
    room.members.add(this)
    this.ask(room)
    const early = this.takeHeld()
    for (const { bytes, frame } of early) this.handle(bytes, frame)
  }

  /** Updates are held until the answer has been read: those made before it may build on what only the answer brings. */
  private ask(room: Room) {
    this.answered = false
    clearTimeout(this.deadline)
    this.deadline = setTimeout(() => this.end(CLOSE.slowDown, 'no answer'), COLLABORATION_LIMITS.answer)
    this.send(questionFrame(room.vector()))
  }

  private takeHeld() {
    const held = this.held
    this.held = []
    this.heldBytes = 0
    return held
  }

  private hold(bytes: Uint8Array, frame: number) {
    this.heldBytes += bytes.length
    if (this.heldBytes > COLLABORATION_LIMITS.held) return this.end(CLOSE.slowDown, 'too much before the answer')
    this.held.push({ bytes, frame })
  }

  /** A message of the client. Counted before any work, as the client counts before it sends. */
  receive(bytes: Uint8Array): void {
    if (this.isOver) return
    if (carriesContent(bytes)) {
      this.received++
      this.contentAt = Date.now()
    }
    if (this.mode === 'notices') return this.end(CLOSE.malformed, 'nothing to say here')
    if (bytes.length > COLLABORATION_LIMITS.frame) return this.refuse({ code: 'too_large', help: 'The edit is too large to be sent at once.' })
    if (!this.allowance.take(bytes.length)) return this.end(CLOSE.slowDown, 'too much at once')
    if (this.room) this.handle(bytes, this.received)
    else this.hold(bytes, this.received)
  }

  private handle(bytes: Uint8Array, number: number) {
    if (this.isOver || !this.room) return
    const frame = readFrame(bytes)
    if (frame.kind === 'update' && !this.answered) return this.hold(bytes, number)
    this.handleFrame(frame, number, this.room)
  }

  private handleFrame(frame: Frame, number: number, room: Room) {
    switch (frame.kind) {
      case 'question': return this.answerQuestion(frame.vector, room)
      case 'answer': return this.takeAnswer(frame.update, number, room)
      case 'update': return void this.take(frame.update, number, room)
      case 'awareness': return this.takeAwareness(frame.states, room)
      case 'queryAwareness': return room.presence.introduce(this)
      case 'malformed': return this.refuse({ code: 'malformed', help: 'The server could not read what this page sent.' })
    }
  }

  private answerQuestion(vector: Uint8Array, room: Room) {
    let answer: Uint8Array
    try {
      Y.decodeStateVector(vector)
      answer = room.answer(vector)
    }
    catch {
      return this.refuse({ code: 'malformed', help: 'The server could not read what this page sent.' })
    }
    this.send(answerFrame(answer))
    // From here on it is told what is committed later; what was committed before is in the answer.
    this.follows = true
    if (!this.allowance.take(answer.length)) this.end(CLOSE.slowDown, 'asked too often')
  }

  private takeAnswer(update: Uint8Array, number: number, room: Room) {
    const position = this.take(update, number, room)
    if (position === null) return
    clearTimeout(this.deadline)
    this.answered = true
    this.gaps = 0
    // The answer holds all that this client sent before it.
    for (const mark of this.marks) mark.position ??= position
    for (const held of this.takeHeld()) this.handle(held.bytes, held.frame)
    this.acknowledge()
  }

  /** Gives the position of the queue from which on the frame is done; null if it is not taken. */
  private take(update: Uint8Array, number: number, room: Room): number | null {
    const received = this.mode === 'write' ? room.receive(update, this) : this.readOnly(update, room)
    if (this.isOver) return null
    if (received.kind === 'refused') this.refuse(received.refused)
    else if (received.kind === 'missing') this.onGap(number, room)
    else this.mark(number, received.position)
    return received.kind === 'taken' ? received.position : null
  }

  private readOnly(update: Uint8Array, room: Room): Received {
    if (room.holdsNothingNew(update)) return { kind: 'taken', position: 0 }
    return { kind: 'refused', refused: READ_ONLY }
  }

  /** Not counted as done. Once, the client is asked for everything again; a second gap is no accident. */
  private onGap(number: number, room: Room) {
    this.gaps++
    if (this.gaps > 1) return this.refuse({ code: 'malformed', help: 'The edits of this page have a gap.' })
    this.insert({ frame: number, position: null })
    this.ask(room)
  }

  private takeAwareness(states: Uint8Array, room: Room) {
    try {
      room.presence.receive(this, states)
    }
    catch {
      this.refuse({ code: 'malformed', help: 'The server could not read what this page sent.' })
    }
  }

  private mark(frame: number, position: number) {
    this.insert({ frame, position })
    this.acknowledge()
  }

  /** Held frames have smaller numbers than the answer that lets them through, so the order is mended here. */
  private insert(mark: Mark) {
    const at = this.marks.findIndex(({ frame }) => frame > mark.frame)
    this.marks.splice(at === -1 ? this.marks.length : at, 0, mark)
  }

  settled(): void {
    this.acknowledge()
  }

  /** Tells the highest number below which every frame is committed, when it has risen. */
  private acknowledge() {
    let upTo = this.upTo
    while (this.marks[0]?.frame === upTo + 1 && this.isDone(this.marks[0])) {
      upTo++
      this.marks.shift()
    }
    if (upTo === this.upTo) return
    this.upTo = upTo
    this.send(ownMessage(MESSAGE_DONE, { upTo }))
  }

  private isDone(mark: Mark) {
    return mark.position !== null && mark.position <= (this.room?.settled ?? 0)
  }

  changed(what: Changed['what']): void {
    this.send(ownMessage(MESSAGE_CHANGED, { what }))
  }

  private refuse(refused: Refused) {
    log('warn', 'collab.refused', { revision: this.revisionId, user: this.holder.userId, code: refused.code })
    this.send(ownMessage(MESSAGE_REFUSED, refused))
    const code = CLOSE_AFTER[refused.code]
    if (code !== undefined) this.end(code, refused.code)
  }

  send(bytes: Uint8Array): void {
    if (this.isOver) return
    if (this.wire.waiting() > COLLABORATION_LIMITS.unsentToReader) return this.cutOff('does not read')
    this.wire.send(bytes)
  }

  /** Its socket has answered a ping. */
  answersPing(): void {
    this.alive = true
  }

  /** Once each heartbeat. The repeated acknowledgement also keeps the client's own watch (30 s without a message) quiet. */
  beat(): void {
    if (!this.alive) return this.cutOff('no answer to a ping')
    this.alive = false
    this.wire.ping()
    if (this.room) this.send(ownMessage(MESSAGE_DONE, { upTo: this.upTo }))
  }

  private cutOff(why: string) {
    log('info', 'collab.cut_off', { revision: this.revisionId, user: this.holder.userId, why })
    this.over()
    this.wire.terminate()
  }

  end(code: CloseCode, reason: string): void {
    if (this.isOver) return
    this.over()
    this.wire.close(code, reason)
  }

  /** The socket is gone, from whichever end. */
  over(): void {
    if (this.isOver) return
    this.isOver = true
    this.follows = false
    clearTimeout(this.deadline)
    this.takeHeld()
    this.room?.members.delete(this)
    this.room?.presence.leave(this)
    this.onOver(this)
  }
}
