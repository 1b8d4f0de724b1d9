/**
 * Edits that a freeze left behind: which blocks and lines of a kept document carry something that the server
 * had not confirmed. They are shown to their author, and put back only when the author says so.
 */
import * as Y from 'yjs'
import { SHEET_FRAGMENT } from './messages'

export interface UnsentBlock {
  blockId: string | null
  lineId: string | null
  /** The block's kind: `calculation`, `paragraph` … */
  kind: string
  /** Its text as it is on this device. */
  text: string
}

export interface UnsentEdits {
  epoch: number
  blocks: UnsentBlock[]
  /** Blocks or lines taken out; their text is gone from the document. */
  removals: number
}

type Container = Y.XmlElement | Y.XmlFragment

const isElement = (type: unknown): type is Y.XmlElement => type instanceof Y.XmlElement

/** The line, or else the top-level block, that `type` is in; the fragment itself when it is in none. */
function homeOf(type: Y.AbstractType<unknown> | null): Container | null {
  let home: Container | null = null
  for (let at = type; at; at = at.parent as Y.AbstractType<unknown> | null) {
    if (isElement(at) && at.nodeName === 'line') return at
    if (isElement(at) || at instanceof Y.XmlFragment) home = isElement(at) || home === null ? at : home
  }
  return home
}

const parentType = (item: Y.Item) => item.parent instanceof Y.AbstractType ? item.parent as Y.AbstractType<unknown> : null

interface Touched { homes: Set<Container>, removals: number }

function noteWritten(item: Y.Item, touched: Touched) {
  const type = item.content instanceof Y.ContentType ? item.content.type as Y.AbstractType<unknown> : parentType(item)
  const home = homeOf(type)
  if (home) touched.homes.add(home)
}

function noteRemoved(item: Y.Item, touched: Touched) {
  const home = homeOf(parentType(item))
  if (home && !(isElement(home) && home._item?.deleted)) {
    if (isElement(home)) touched.homes.add(home)
    else touched.removals++
  }
}

/** Neighbouring deletions are one struct, so both its ends are asked. */
const wasDeleted = (since: Y.Snapshot, struct: Y.Item) => Y.isDeleted(since.ds, struct.id)
  && Y.isDeleted(since.ds, Y.createID(struct.id.client, struct.id.clock + struct.length - 1))

/** Goes through what is in `doc` and was not in `since`; written structs only those of `authors`, when given. */
function touchedSince(doc: Y.Doc, since: Y.Snapshot, authors: ReadonlySet<number> | null): Touched {
  const touched: Touched = { homes: new Set(), removals: 0 }
  for (const [client, structs] of doc.store.clients) {
    const known = since.sv.get(client) ?? 0
    for (const struct of structs) {
      if (!(struct instanceof Y.Item)) continue
      const isNew = struct.id.clock + struct.length > known
      if (isNew && !struct.deleted && (!authors || authors.has(client))) noteWritten(struct, touched)
      if (!isNew && struct.deleted && !wasDeleted(since, struct)) noteRemoved(struct, touched)
    }
  }
  return touched
}

/** All text below an element, a space between its parts. */
export function plainText(type: Container | Y.XmlText | Y.XmlHook): string {
  if (type instanceof Y.XmlText) return type.toDelta().map((part: { insert?: unknown }) => typeof part.insert === 'string' ? part.insert : '').join('')
  if (!(type instanceof Y.XmlFragment)) return ''
  return type.toArray().map(child => plainText(child)).filter(text => text !== '').join(' ')
}

const attribute = (element: Y.XmlElement, name: string) => {
  const value: unknown = element.getAttribute(name)
  return typeof value === 'string' ? value : null
}

function describe(block: Y.XmlElement, homes: ReadonlySet<Container>): UnsentBlock[] {
  const blockId = attribute(block, 'id')
  const lines = block.toArray().filter((child): child is Y.XmlElement => isElement(child) && homes.has(child))
  if (lines.length > 0) return lines.map(line => ({ blockId, lineId: attribute(line, 'id'), kind: block.nodeName, text: plainText(line) }))
  return homes.has(block) ? [{ blockId, lineId: null, kind: block.nodeName, text: plainText(block) }] : []
}

/**
 * What `doc` holds beyond the confirmed state `since` (null: nothing was ever confirmed), in the document's order.
 * @param authors Yjs client ids of this person on this device; null takes everybody's.
 */
export function unsentEdits(doc: Y.Doc, since: Y.Snapshot | null, authors: ReadonlySet<number> | null): Omit<UnsentEdits, 'epoch'> {
  const { homes, removals } = touchedSince(doc, since ?? Y.emptySnapshot, authors)
  const blocks = doc.getXmlFragment(SHEET_FRAGMENT).toArray()
    .flatMap(block => isElement(block) ? describe(block, homes) : [])
  return { blocks, removals }
}

/** The unconfirmed edits as an update that a later draft of the same document can take in. */
export function unsentUpdate(doc: Y.Doc, since: Y.Snapshot | null): Uint8Array {
  return Y.encodeStateAsUpdate(doc, Y.encodeStateVector(since?.sv ?? new Map<number, number>()))
}

/** The name of the copy that this device keeps; another person's copy is never opened. */
export const storeName = (revisionId: string, epoch: number, userId: string) => `${revisionId}/${epoch}/${userId}`

/** The epoch in the name of a kept copy of this revision and person; null for any other name. */
export function storeEpoch(name: string, revisionId: string, userId: string): number | null {
  const [revision, epoch, user, ...rest] = name.split('/')
  if (revision !== revisionId || user !== userId || rest.length > 0 || !/^\d+$/.test(epoch ?? '')) return null
  return Number(epoch)
}
