/** A socket that says whatever a test wants, for clients that are not the product's own. */
import { WebSocket } from 'ws'
import * as decoding from 'lib0/decoding'
import * as encoding from 'lib0/encoding'
import { inject } from 'vitest'
import * as Y from 'yjs'
import { DOCUMENT_FORMAT } from '../../../shared/document/types'
import { MESSAGE_CHANGED, MESSAGE_DONE, MESSAGE_REFUSED, MESSAGE_SYNC, SYNC_ANSWER, SYNC_QUESTION, SYNC_UPDATE } from '../../../shared/collab/messages'
import { openSessionFor, SESSION_COOKIE, type Person } from '../../helpers/people'
import type { Draft } from './drafts'
import { watcher } from './sheet'

export interface Heard {
  questions: Uint8Array[]
  answers: Uint8Array[]
  updates: Uint8Array[]
  upTo: number
  refused: { code: string, help: string }[]
  changed: string[]
  closed: number | null
  failed: string | null
}

export function frame(kind: number, payload: Uint8Array): Uint8Array {
  const encoder = encoding.createEncoder()
  encoding.writeVarUint(encoder, MESSAGE_SYNC)
  encoding.writeVarUint(encoder, kind)
  encoding.writeVarUint8Array(encoder, payload)
  return encoding.toUint8Array(encoder)
}
export const question = (doc = new Y.Doc()) => frame(SYNC_QUESTION, Y.encodeStateVector(doc))
export const answer = (update: Uint8Array) => frame(SYNC_ANSWER, update)
export const update = (bytes: Uint8Array) => frame(SYNC_UPDATE, bytes)
export const EMPTY_UPDATE = new Uint8Array([0, 0])

export class RawSocket {
  readonly heard: Heard = { questions: [], answers: [], updates: [], upTo: 0, refused: [], changed: [], closed: null, failed: null }
  readonly watch = watcher(() => this.heard)
  readonly socket: WebSocket

  constructor(url: string, headers: Record<string, string>) {
    this.socket = new WebSocket(url, { headers })
    this.socket.binaryType = 'arraybuffer'
    this.socket.on('message', data => this.hear(new Uint8Array(data as ArrayBuffer)))
    this.socket.on('open', () => this.watch.changed())
    this.socket.on('close', code => this.note(() => this.heard.closed = code))
    this.socket.on('error', error => this.note(() => this.heard.failed = error.message))
  }

  private note(change: () => unknown) {
    change()
    this.watch.changed()
  }

  private hear(bytes: Uint8Array) {
    const decoder = decoding.createDecoder(bytes)
    const type = decoding.readVarUint(decoder)
    if (type === MESSAGE_SYNC) {
      const kind = decoding.readVarUint(decoder)
      const payload = decoding.readVarUint8Array(decoder)
      const list = kind === SYNC_QUESTION ? this.heard.questions : kind === SYNC_ANSWER ? this.heard.answers : this.heard.updates
      list.push(payload)
    }
    if (type === MESSAGE_DONE) this.heard.upTo = (JSON.parse(decoding.readVarString(decoder)) as { upTo: number }).upTo
    if (type === MESSAGE_REFUSED) this.heard.refused.push(JSON.parse(decoding.readVarString(decoder)) as Heard['refused'][number])
    if (type === MESSAGE_CHANGED) this.heard.changed.push((JSON.parse(decoding.readVarString(decoder)) as { what: string }).what)
    this.watch.changed()
  }

  send(bytes: Uint8Array | string): void {
    this.socket.send(bytes)
  }

  asked(times = 1) {
    return this.watch.wait(heard => heard.questions.length >= times || heard.closed !== null, 'the server asks')
  }

  done(upTo: number) {
    return this.watch.wait(heard => heard.upTo >= upTo, `frame ${upTo} is committed`)
  }

  refusedWith(code: string) {
    return this.watch.wait(heard => heard.refused.some(refused => refused.code === code), `refused with ${code}`)
  }

  closedWith(...codes: number[]) {
    return this.watch.wait(heard => heard.closed !== null && codes.includes(heard.closed), `closed with ${codes.join(' or ')}`)
  }

  close(): void {
    this.socket.terminate()
  }
}

const open: RawSocket[] = []

export interface RawOptions { base?: string, origin?: string | null, cookie?: string | null, query?: string, path?: string }

export async function openRaw(person: Person | null, draft: Pick<Draft, 'revisionId' | 'epoch'>, options: RawOptions = {}): Promise<RawSocket> {
  const base = options.base ?? inject('base').url
  const cookie = options.cookie ?? (person ? `${SESSION_COOKIE}=${(await openSessionFor(person)).cookie}` : null)
  const path = options.path ?? `/collaboration/${draft.revisionId}`
  const query = options.query ?? `?epoch=${draft.epoch}&format=${DOCUMENT_FORMAT}`
  const raw = new RawSocket(`${base.replace(/^http/, 'ws')}${path}${query}`, {
    ...cookie ? { cookie } : {},
    ...options.origin === null ? {} : { origin: options.origin ?? base },
  })
  open.push(raw)
  return raw
}

/** Through the beginning: asked, answered with nothing, and told what there is. */
export async function openReady(person: Person, draft: Pick<Draft, 'revisionId' | 'epoch'>, doc = new Y.Doc()): Promise<{ raw: RawSocket, doc: Y.Doc }> {
  const raw = await openRaw(person, draft)
  await raw.asked()
  raw.send(question(doc))
  raw.send(answer(EMPTY_UPDATE))
  await raw.watch.wait(heard => heard.answers.length > 0 && heard.upTo === 1, 'the document arrives')
  Y.applyUpdate(doc, raw.heard.answers[0]!)
  return { raw, doc }
}

export function closeRaw(): void {
  for (const raw of open.splice(0)) raw.close()
}
