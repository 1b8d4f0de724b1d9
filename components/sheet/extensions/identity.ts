/**
 * Ids of blocks and lines. Only the client that split, pasted or duplicated gives a new id, in that
 * same transaction, so that two clients never answer one duplicate with two different ids.
 */
import { Extension } from '@tiptap/core'
import { Plugin, PluginKey, type EditorState, type Transaction } from '@tiptap/pm/state'
import type { Node as DocumentNode } from '@tiptap/pm/model'
import { isChangeOrigin } from '@tiptap/extension-collaboration'

const ALPHABET = '0123456789abcdefghjkmnpqrstvwxyz'

/** 16 characters of 5 random bits each. */
export function newNodeId(): string {
  return Array.from(crypto.getRandomValues(new Uint8Array(16)), byte => ALPHABET[byte & 31]).join('')
}

interface Bearer { pos: number, id: string }

/** Every node that has an id of its own: top-level blocks and the lines within them. */
export function idBearers(doc: DocumentNode): Bearer[] {
  const found: Bearer[] = []
  doc.forEach((block, pos) => {
    found.push({ pos, id: String(block.attrs.id ?? '') })
    if (block.type.name !== 'calculation' && block.type.name !== 'requirements') return
    block.forEach((line, offset) => found.push({ pos: pos + 1 + offset, id: String(line.attrs.id ?? '') }))
  })
  return found
}

/** Positions whose node needs a new id: without one, or a copy of a node that stood elsewhere before. */
export function positionsWithoutOwnId(before: DocumentNode, after: DocumentNode, mapped: (pos: number) => number): number[] {
  const bearers = idBearers(after)
  const seen = new Map<string, Bearer[]>()
  for (const bearer of bearers) seen.set(bearer.id, [...seen.get(bearer.id) ?? [], bearer])
  const former = new Map<string, number>()
  const wanting: number[] = []
  for (const [id, holders] of seen) {
    if (id === '') wanting.push(...holders.map(holder => holder.pos))
    if (id === '' || holders.length === 1) continue
    if (former.size === 0) for (const bearer of idBearers(before)) if (!former.has(bearer.id)) former.set(bearer.id, mapped(bearer.pos))
    const keeper = holders.find(holder => holder.pos === former.get(id)) ?? holders[0]
    wanting.push(...holders.filter(holder => holder !== keeper).map(holder => holder.pos))
  }
  return wanting.sort((a, b) => a - b)
}

function giveIds(transactions: readonly Transaction[], before: EditorState, after: EditorState): Transaction | null {
  const local = transactions.some(transaction => transaction.docChanged) && !transactions.some(isChangeOrigin)
  if (!local) return null
  const mapped = (pos: number) => transactions.reduce((at, transaction) => transaction.mapping.map(at), pos)
  const positions = positionsWithoutOwnId(before.doc, after.doc, mapped)
  const tr = after.tr
  for (const pos of positions) tr.setNodeAttribute(pos, 'id', newNodeId())
  fillEmptyContainers(tr)
  return tr.docChanged ? tr : null
}

/** Cells and items may be empty after a merge; here, where one typed, they get the paragraph one types in. */
function fillEmptyContainers(tr: Transaction): void {
  const empty: number[] = []
  tr.doc.descendants((node, pos) => {
    if (node.childCount === 0 && ['tableCell', 'tableHeader', 'listItem'].includes(node.type.name)) empty.push(pos)
    return !node.isTextblock && node.type.name !== 'calculation' && node.type.name !== 'requirements'
  })
  const paragraph = tr.doc.type.schema.nodes.paragraph
  if (paragraph) for (const pos of empty.reverse()) tr.insert(pos + 1, paragraph.create())
}

export const Identity = Extension.create({
  name: 'identity',
  addProseMirrorPlugins: () => [
    new Plugin({ key: new PluginKey('identity'), appendTransaction: giveIds }),
  ],
})

/** While one only reads, nothing leaves this browser: not even what the editor would put in order by itself. */
export const OnlyRead = Extension.create({
  name: 'onlyRead',
  addProseMirrorPlugins() {
    return [new Plugin({
      key: new PluginKey('onlyRead'),
      filterTransaction: transaction => !transaction.docChanged || this.editor.isEditable || isChangeOrigin(transaction),
    })]
  },
})
