/**
 * What an update from outside would do, before it may do it: whose ids it writes under, what kinds of content it
 * brings, how far its clocks reach. An update that passes can still be incomplete; that shows when it is applied.
 */
import * as Y from 'yjs'
import { SHEET_FRAGMENT, type Refused } from '../../shared/collab/messages'
import { COLLABORATION_LIMITS } from '../../shared/limits'

export interface Inspected {
  /** Yjs client ids under which it writes something new. */
  clients: Set<number>
  /** New elements and texts, whose depth shows once they stand in the document. */
  containers: Y.ID[]
}

export type Inspection = { ok: true, inspected: Inspected } | { ok: false, refused: Refused }

const refuse = (code: Refused['code'], help: string): Inspection => ({ ok: false, refused: { code, help } })

const MALFORMED = 'The server could not read the edit.'
const FOREIGN = 'The edit holds something that a sheet does not.'

/** Elements, texts, their characters, marks and attributes; nothing else occurs in a sheet. */
function belongsInSheet(item: Y.Item): boolean {
  const { content, parent } = item
  if (typeof parent === 'string' && parent !== SHEET_FRAGMENT) return false
  if (content instanceof Y.ContentType) return content.type instanceof Y.XmlElement || content.type instanceof Y.XmlText
  return content instanceof Y.ContentString || content instanceof Y.ContentFormat
    || content instanceof Y.ContentAny || content instanceof Y.ContentDeleted
}

type Struct = ReturnType<typeof Y.decodeUpdate>['structs'][number]

function inspectStruct(struct: Struct, inspected: Inspected, owner: (client: number) => string | undefined, userId: string): Refused | null {
  const bound = owner(struct.id.client)
  if (bound !== undefined && bound !== userId) return { code: 'not_yours', help: 'The edit is written in another person\'s name.' }
  if (struct.id.clock + struct.length > COLLABORATION_LIMITS.clock) return { code: 'malformed', help: MALFORMED }
  inspected.clients.add(struct.id.client)
  if (!(struct instanceof Y.Item)) return null
  if (!belongsInSheet(struct)) return { code: 'not_sheet', help: FOREIGN }
  if (struct.content instanceof Y.ContentType) inspected.containers.push(struct.id)
  return null
}

/**
 * @param doc the document it is meant for; what that has already is passed over
 * @param owner the user to whom a Yjs client id belongs in this document, if to any
 */
export function inspectUpdate(update: Uint8Array, doc: Y.Doc, owner: (client: number) => string | undefined, userId: string): Inspection {
  let decoded: ReturnType<typeof Y.decodeUpdate>
  try {
    decoded = Y.decodeUpdate(update)
  }
  catch {
    return refuse('malformed', MALFORMED)
  }
  const inspected: Inspected = { clients: new Set(), containers: [] }
  for (const struct of decoded.structs) {
    if (struct instanceof Y.Skip) continue
    if (struct.id.clock + struct.length <= Y.getState(doc.store, struct.id.client)) continue
    const refused = inspectStruct(struct, inspected, owner, userId)
    if (refused) return { ok: false, refused }
  }
  return { ok: true, inspected }
}

/** How many elements stand around this one; stops counting past the limit. */
function depthOf(type: Y.AbstractType<unknown>): number {
  let depth = 0
  for (let at: unknown = type; at instanceof Y.AbstractType && depth <= COLLABORATION_LIMITS.depth; at = at.parent) depth++
  return depth
}

/** Whether one of these ids, which now stand in `doc`, lies deeper than a sheet may. */
export function isTooDeep(doc: Y.Doc, containers: readonly Y.ID[]): boolean {
  return containers.some((id) => {
    if (id.clock >= Y.getState(doc.store, id.client)) return false
    const item: unknown = Y.getItem(doc.store, id)
    return item instanceof Y.Item && item.content instanceof Y.ContentType
      && depthOf(item.content.type as Y.AbstractType<unknown>) > COLLABORATION_LIMITS.depth
  })
}
