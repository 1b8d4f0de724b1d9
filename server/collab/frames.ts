/** The frames of the socket as values. Whatever is not exactly one of them is `malformed`. */
import * as decoding from 'lib0/decoding'
import * as encoding from 'lib0/encoding'
import {
  MESSAGE_AWARENESS, MESSAGE_QUERY_AWARENESS, MESSAGE_SYNC, SYNC_ANSWER, SYNC_QUESTION, SYNC_UPDATE,
} from '../../shared/collab/messages'

export type Frame =
  | { kind: 'question', vector: Uint8Array }
  | { kind: 'answer', update: Uint8Array }
  | { kind: 'update', update: Uint8Array }
  | { kind: 'awareness', states: Uint8Array }
  | { kind: 'queryAwareness' }
  | { kind: 'malformed', why: string }

/** Whether a frame carries content; both ends count these. Looks at two bytes only, so that a broken one is counted alike. */
export const carriesContent = (bytes: Uint8Array) => bytes[0] === MESSAGE_SYNC && (bytes[1] === SYNC_ANSWER || bytes[1] === SYNC_UPDATE)

const malformed = (why: string): Frame => ({ kind: 'malformed', why })

function readSync(decoder: decoding.Decoder): Frame {
  const type = decoding.readVarUint(decoder)
  const bytes = decoding.readVarUint8Array(decoder)
  if (type === SYNC_QUESTION) return { kind: 'question', vector: bytes }
  if (type === SYNC_ANSWER) return { kind: 'answer', update: bytes }
  if (type === SYNC_UPDATE) return { kind: 'update', update: bytes }
  return malformed('unknown kind of sync message')
}

function read(decoder: decoding.Decoder): Frame {
  const type = decoding.readVarUint(decoder)
  if (type === MESSAGE_SYNC) return readSync(decoder)
  if (type === MESSAGE_AWARENESS) return { kind: 'awareness', states: decoding.readVarUint8Array(decoder) }
  if (type === MESSAGE_QUERY_AWARENESS) return { kind: 'queryAwareness' }
  return malformed('unknown type of message')
}

/** Only the types that a client may send: 64 to 66 are the server's. */
export function readFrame(bytes: Uint8Array): Frame {
  try {
    const decoder = decoding.createDecoder(bytes)
    const frame = read(decoder)
    return decoding.hasContent(decoder) ? malformed('bytes after the end') : frame
  }
  catch (error) {
    return malformed(error instanceof Error ? error.message : 'unreadable')
  }
}

function syncFrame(type: number, payload: Uint8Array): Uint8Array {
  const encoder = encoding.createEncoder()
  encoding.writeVarUint(encoder, MESSAGE_SYNC)
  encoding.writeVarUint(encoder, type)
  encoding.writeVarUint8Array(encoder, payload)
  return encoding.toUint8Array(encoder)
}

export const questionFrame = (vector: Uint8Array) => syncFrame(SYNC_QUESTION, vector)
export const answerFrame = (update: Uint8Array) => syncFrame(SYNC_ANSWER, update)
export const updateFrame = (update: Uint8Array) => syncFrame(SYNC_UPDATE, update)

export interface AwarenessEntry { client: number, clock: number, state: unknown }

/**
 * One client's entry of an awareness update: that of `client`, or the first one when null; null if it is not in it or
 * its state is longer than `longest` characters.
 * Clients repeat what they heard of others, so the rest is passed over unread. Throws on what is no awareness update.
 */
export function readAwareness(bytes: Uint8Array, client: number | null, longest: number): AwarenessEntry | null {
  const decoder = decoding.createDecoder(bytes)
  const count = decoding.readVarUint(decoder)
  for (let i = 0; i < count; i++) {
    const entry = { client: decoding.readVarUint(decoder), clock: decoding.readVarUint(decoder) }
    const text = decoding.readVarString(decoder)
    if (client !== null && entry.client !== client) continue
    return text.length > longest ? null : { ...entry, state: JSON.parse(text) as unknown }
  }
  return null
}

export function awarenessFrame(entries: readonly AwarenessEntry[]): Uint8Array {
  const states = encoding.createEncoder()
  encoding.writeVarUint(states, entries.length)
  for (const { client, clock, state } of entries) {
    encoding.writeVarUint(states, client)
    encoding.writeVarUint(states, clock)
    encoding.writeVarString(states, JSON.stringify(state))
  }
  const encoder = encoding.createEncoder()
  encoding.writeVarUint(encoder, MESSAGE_AWARENESS)
  encoding.writeVarUint8Array(encoder, encoding.toUint8Array(states))
  return encoding.toUint8Array(encoder)
}
