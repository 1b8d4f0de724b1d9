/**
 * Where annotations hang. Besides the place in the frozen text each keeps two positions that move with the text when it is edited
 * again after a return. Where those are gone: the quote inside the block, else the block, else the sheet with the quote shown.
 */
import * as Y from 'yjs'
import { FRAGMENT } from '#shared/document/yjs'
import { createSheetLog } from '../../collab/log'
import { sequelize, type Annotation } from '..'

export interface Place { blockId: string | null, from: number | null, to: number | null }
export type ResolvedAnchor = Place
interface Positions { relFrom: Buffer | null, relTo: Buffer | null }

const elements = (parent: Y.XmlFragment): Y.XmlElement[] => parent.toArray().filter(child => child instanceof Y.XmlElement)

/** The element of a block or line; for a line its formula. */
function textHolder(ydoc: Y.Doc, blockId: string): Y.XmlElement | null {
  for (const block of elements(ydoc.getXmlFragment(FRAGMENT))) {
    if (block.getAttribute('id') === blockId) return block
    const line = elements(block).find(child => child.getAttribute('id') === blockId)
    if (line) return elements(line).find(child => child.nodeName === 'source') ?? line
  }
  return null
}

/** The texts below an element, in order. */
function textsOf(element: Y.XmlElement): Y.XmlText[] {
  return element.toArray().flatMap(child => (child instanceof Y.XmlText ? [child] : child instanceof Y.XmlElement ? textsOf(child) : []))
}

/** `before`: sticks to the character before it, so that what is typed at the end of a quote is not in it. */
function positionAt(texts: readonly Y.XmlText[], offset: number, before: boolean): Buffer | null {
  let rest = offset
  for (const text of texts) {
    if (rest <= text.length) return Buffer.from(Y.encodeRelativePosition(Y.createRelativePositionFromTypeIndex(text, rest, before ? -1 : 0)))
    rest -= text.length
  }
  return null
}

/** Offset within the block's text at which a stored position stands now; null when that text is gone. */
function offsetOf(ydoc: Y.Doc, texts: readonly Y.XmlText[], position: Uint8Array): number | null {
  const absolute = Y.createAbsolutePositionFromRelativePosition(Y.decodeRelativePosition(position), ydoc)
  if (!absolute) return null
  let before = 0
  for (const text of texts) {
    if (text === absolute.type) return before + absolute.index
    before += text.length
  }
  return null
}

/** The draft's document as the log has it; null when there is none. The caller destroys it. */
async function loadDocument(revisionId: string): Promise<Y.Doc | null> {
  const loaded = await createSheetLog(sequelize).load(revisionId)
  if (!loaded) return null
  const ydoc = new Y.Doc()
  Y.applyUpdate(ydoc, loaded.update)
  return ydoc
}

/** Positions for a place in the text as it was frozen, which is as the log has it until the revision is a draft again. */
export async function relativePositions(revisionId: string, place: Place): Promise<Positions> {
  const none = { relFrom: null, relTo: null }
  if (place.blockId === null || place.from === null || place.to === null) return none
  const ydoc = await loadDocument(revisionId)
  const holder = ydoc ? textHolder(ydoc, place.blockId) : null
  const texts = holder ? textsOf(holder) : []
  const positions = holder ? { relFrom: positionAt(texts, place.from, false), relTo: positionAt(texts, place.to, true) } : none
  ydoc?.destroy()
  return positions
}

const plainText = (text: Y.XmlText): string => (text.toDelta() as { insert: unknown }[])
  .map(part => (typeof part.insert === 'string' ? part.insert : '\uFFFC')).join('')

function resolve(ydoc: Y.Doc, { blockId, quote, relFrom, relTo }: Annotation): ResolvedAnchor {
  const holder = blockId === null ? null : textHolder(ydoc, blockId)
  if (!holder) return { blockId: null, from: null, to: null }
  const texts = textsOf(holder)
  const from = relFrom ? offsetOf(ydoc, texts, relFrom) : null
  const to = relTo ? offsetOf(ydoc, texts, relTo) : null
  if (from !== null && to !== null && from < to) return { blockId, from, to }
  const found = quote === '' ? -1 : texts.map(plainText).join('').indexOf(quote)
  return found === -1 ? { blockId, from: null, to: null } : { blockId, from: found, to: found + quote.length }
}

/** Where the annotations of a draft stand now. */
export async function resolveAnchors(revisionId: string, annotations: readonly Annotation[]): Promise<Map<string, ResolvedAnchor>> {
  const ydoc = annotations.length > 0 ? await loadDocument(revisionId) : null
  if (!ydoc) return new Map()
  const places = new Map(annotations.map(annotation => [annotation.id, resolve(ydoc, annotation)]))
  ydoc.destroy()
  return places
}

/** In a frozen text an annotation stands where it was put. */
export const frozenAnchor = ({ blockId, fromPos, toPos }: Annotation): ResolvedAnchor => ({ blockId, from: fromPos, to: toPos })
