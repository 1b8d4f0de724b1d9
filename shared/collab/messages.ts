/**
 * The words of the collaboration socket. Types 0, 1 and 3 are y-protocols' own; 64 to 66 are ours:
 * a type number (variable-length integer) and one JSON text each, from the server to the client only.
 */
import * as decoding from 'lib0/decoding'
import * as encoding from 'lib0/encoding'
import { z } from 'zod'

/** The Y.XmlFragment that holds the sheet. */
export const SHEET_FRAGMENT = 'sheet'

export const MESSAGE_SYNC = 0
export const MESSAGE_AWARENESS = 1
export const MESSAGE_QUERY_AWARENESS = 3
export const MESSAGE_DONE = 64
export const MESSAGE_REFUSED = 65
export const MESSAGE_CHANGED = 66

export const SYNC_QUESTION = 0
export const SYNC_ANSWER = 1
export const SYNC_UPDATE = 2

/** Frames of this connection up to this number (from 1) are committed. */
export const doneSchema = z.object({ upTo: z.int().nonnegative() })
export type Done = z.infer<typeof doneSchema>

export const REFUSAL_CODES = ['read_only', 'too_large', 'sheet_full', 'too_deep', 'not_sheet', 'not_yours', 'malformed', 'frozen'] as const
export const refusedSchema = z.object({ code: z.enum(REFUSAL_CODES), help: z.string().max(500) })
export type Refused = z.infer<typeof refusedSchema>

/** Something about the revision changed; whoever shows it fetches it again. */
export const changedSchema = z.object({ what: z.enum(['state', 'check', 'document']) })
export type Changed = z.infer<typeof changedSchema>

/**
 * Why the server closes. 4400 to 4499 stop y-websocket's provider for good, 4500 to 4599 let it try again.
 * 1009 is the protocol's own word for a message above the limit.
 */
export const CLOSE = {
  tooLarge: 1009,
  malformed: 4400,
  signedOut: 4401,
  noRight: 4403,
  notFound: 4404,
  frozen: 4409,
  refused: 4422,
  outdated: 4426,
  tryAgain: 4503,
  slowDown: 4529,
} as const
export type CloseCode = typeof CLOSE[keyof typeof CLOSE]

/**
 * The address of the socket, `/collaboration/{revision}?epoch=N&format=F`. A page with a draft names the epoch and the
 * document format it knows; without them it is only told of changes.
 */
export const socketAddressSchema = z.object({
  revisionId: z.string().regex(/^[0-9A-HJKMNP-TV-Z]{26}$/),
  epoch: z.coerce.number().int().positive().optional(),
  format: z.coerce.number().int().positive().optional(),
})
export type SocketAddress = z.infer<typeof socketAddressSchema>

const SOCKET_PATH = /^\/collaboration\/([^/]+)$/

/** The parts of a socket's address; null if it is none of ours. `url` is absolute. */
export function readSocketAddress(url: string): SocketAddress | null {
  if (!URL.canParse(url)) return null
  const { pathname, searchParams } = new URL(url)
  const parsed = socketAddressSchema.safeParse({
    revisionId: SOCKET_PATH.exec(pathname)?.[1],
    epoch: searchParams.get('epoch') ?? undefined,
    format: searchParams.get('format') ?? undefined,
  })
  return parsed.success ? parsed.data : null
}

/** A message of our own as bytes. */
export function ownMessage(type: typeof MESSAGE_DONE, body: Done): Uint8Array
export function ownMessage(type: typeof MESSAGE_REFUSED, body: Refused): Uint8Array
export function ownMessage(type: typeof MESSAGE_CHANGED, body: Changed): Uint8Array
export function ownMessage(type: number, body: Done | Refused | Changed): Uint8Array {
  const encoder = encoding.createEncoder()
  encoding.writeVarUint(encoder, type)
  encoding.writeVarString(encoder, JSON.stringify(body))
  return encoding.toUint8Array(encoder)
}

/** The body of a message of our own, its type number already read; null if it is not of that shape. */
export function readOwnMessage<T>(decoder: decoding.Decoder, schema: z.ZodType<T>): T | null {
  try {
    const parsed = schema.safeParse(JSON.parse(decoding.readVarString(decoder)))
    return parsed.success ? parsed.data : null
  }
  catch {
    return null
  }
}
