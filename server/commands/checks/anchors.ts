/**
 * Where an annotation hangs, for as long as its block lives: besides the place in the frozen text, two positions that move with
 * the text when it is edited again after a return.
 */
import * as Y from 'yjs'
import { FRAGMENT } from '#shared/document/yjs'
import { createSheetLog } from '../../collab/log'
import { sequelize } from '../../database'

interface Place { blockId: string | null, from: number | null, to: number | null }
interface Positions { relFrom: Buffer | null, relTo: Buffer | null }

const elements = (parent: Y.XmlFragment): Y.XmlElement[] => parent.toArray().filter(child => child instanceof Y.XmlElement)

/** The element of a block or line; for a line its formula. */
export function textHolder(ydoc: Y.Doc, blockId: string): Y.XmlElement | null {
  for (const block of elements(ydoc.getXmlFragment(FRAGMENT))) {
    if (block.getAttribute('id') === blockId) return block
    const line = elements(block).find(child => child.getAttribute('id') === blockId)
    if (line) return elements(line).find(child => child.nodeName === 'source') ?? line
  }
  return null
}

/** The texts below an element, in order. */
export function textsOf(element: Y.XmlElement): Y.XmlText[] {
  return element.toArray().flatMap(child => (child instanceof Y.XmlText ? [child] : child instanceof Y.XmlElement ? textsOf(child) : []))
}

function positionAt(texts: readonly Y.XmlText[], offset: number, after: boolean): Buffer | null {
  let rest = offset
  for (const text of texts) {
    if (rest <= text.length) return Buffer.from(Y.encodeRelativePosition(Y.createRelativePositionFromTypeIndex(text, rest, after ? -1 : 0)))
    rest -= text.length
  }
  return null
}

/** Offset within the block's text at which a stored position stands now; null when the text is gone. */
export function offsetOf(ydoc: Y.Doc, texts: readonly Y.XmlText[], position: Uint8Array): number | null {
  const absolute = Y.createAbsolutePositionFromRelativePosition(Y.decodeRelativePosition(position), ydoc)
  if (!absolute) return null
  let before = 0
  for (const text of texts) {
    if (text === absolute.type) return before + absolute.index
    before += text.length
  }
  return null
}

export async function relativePositions(revisionId: string, place: Place): Promise<Positions> {
  const none = { relFrom: null, relTo: null }
  if (place.blockId === null || place.from === null || place.to === null) return none
  const loaded = await createSheetLog(sequelize).load(revisionId)
  if (!loaded) return none
  const ydoc = new Y.Doc()
  try {
    Y.applyUpdate(ydoc, loaded.update)
    const holder = textHolder(ydoc, place.blockId)
    if (!holder) return none
    const texts = textsOf(holder)
    return { relFrom: positionAt(texts, place.from, false), relTo: positionAt(texts, place.to, true) }
  }
  finally { ydoc.destroy() }
}
