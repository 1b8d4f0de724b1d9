import * as Y from 'yjs'
import { prosemirrorJSONToYDoc } from '@tiptap/y-tiptap'
import { sheetSchema } from './schema'
import type { SheetDocument } from './types'

/** The name of the Y.XmlFragment that holds a sheet. */
export const FRAGMENT = 'sheet'

/** A new sheet: one empty paragraph to type in. */
export const emptyDocument = (id: string): SheetDocument => ({ type: 'doc', content: [{ type: 'paragraph', attrs: { id, reference: '' } }] })

/**
 * The Yjs update that begins a revision's document. Made once, on the server, in the transaction that creates the revision:
 * a client that seeded the same content would double it.
 */
export function createInitialUpdate(document: SheetDocument): Uint8Array {
  const ydoc = prosemirrorJSONToYDoc(sheetSchema, document, FRAGMENT)
  const update = Y.encodeStateAsUpdate(ydoc)
  ydoc.destroy()
  return update
}
