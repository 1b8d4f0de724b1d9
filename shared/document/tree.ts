import * as Y from 'yjs'
import { yXmlFragmentToProsemirrorJSON } from '@tiptap/y-tiptap'
import { DOCUMENT_BOUNDS } from './bounds'

/** A document as it comes from outside, before anything is known about it. */
export interface RawNode {
  type?: unknown
  text?: unknown
  attrs?: unknown
  marks?: unknown
  content?: unknown
}

/** The document as a whole is out of bounds; `message` is for the person who edits it. */
export class DocumentOutOfBounds extends Error {}

const tooDeep = () => new DocumentOutOfBounds(`Something in this sheet is nested more than ${DOCUMENT_BOUNDS.depth} levels deep. Remove it.`)
const tooMany = () => new DocumentOutOfBounds(`This sheet has more than ${DOCUMENT_BOUNDS.nodes} parts. Divide it into several sheets.`)

/** Without recursion, since what is measured may be deeper than the stack. Throws `DocumentOutOfBounds`. */
function measure<T>(root: T, children: (node: T) => readonly T[]): void {
  const waiting: { node: T, depth: number }[] = [{ node: root, depth: 0 }]
  let nodes = 0
  for (let next = waiting.pop(); next; next = waiting.pop()) {
    if (next.depth > DOCUMENT_BOUNDS.depth) throw tooDeep()
    nodes += 1
    if (nodes > DOCUMENT_BOUNDS.nodes) throw tooMany()
    for (const child of children(next.node)) waiting.push({ node: child, depth: next.depth + 1 })
  }
}

const isRaw = (value: unknown): value is RawNode => typeof value === 'object' && value !== null && !Array.isArray(value)
export const rawChildren = (node: RawNode): RawNode[] => (Array.isArray(node.content) ? node.content.filter(isRaw) : [])

/** Throws `DocumentOutOfBounds` when the document is too deep or too large to be walked. */
export const measureTree = (root: RawNode): void => measure(root, rawChildren)

type SharedNode = Y.XmlFragment | Y.XmlElement | Y.XmlText | Y.XmlHook

/**
 * The sheet in a Yjs document as plain JSON, unvalidated. A pure read: nothing in the document is changed.
 * Throws `DocumentOutOfBounds`.
 */
export function readDocument(ydoc: Y.Doc, fragmentName = 'sheet'): RawNode {
  const fragment = ydoc.getXmlFragment(fragmentName)
  measure<SharedNode>(fragment, node => (node instanceof Y.XmlFragment ? node.toArray().filter(child => child instanceof Y.XmlElement || child instanceof Y.XmlText) : []))
  return yXmlFragmentToProsemirrorJSON(fragment)
}
