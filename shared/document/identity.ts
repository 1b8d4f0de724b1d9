import type { LineNode, SheetBlock, SheetDocument } from './types'

/**
 * Gives later duplicates of an id, and nodes without one, an id derived from the id and the place, so that every reading
 * of the same document gives the same ids. A first bearer keeps its own.
 */
export function withUniqueIds(document: SheetDocument): SheetDocument {
  const own = new Set<string>()
  for (const id of idsInOrder(document)) own.add(id)
  const taken = new Set<string>()
  let place = 0
  const unique = (id: string): string => {
    place += 1
    if (id !== '' && !taken.has(id)) {
      taken.add(id)
      return id
    }
    const stem = `${id.slice(0, 60) || 'part'}.${place}`
    let derived = stem
    for (let n = 2; taken.has(derived) || own.has(derived); n++) derived = `${stem}.${n}`
    taken.add(derived)
    return derived
  }
  return { type: 'doc', content: document.content.map(block => identified(block, unique)) }
}

function identified(block: SheetBlock, unique: (id: string) => string): SheetBlock {
  const id = unique(block.attrs.id)
  if (block.type === 'calculation' || block.type === 'requirements') {
    const lines = block.content?.map((line): LineNode => ({ ...line, attrs: { ...line.attrs, id: unique(line.attrs.id) } }))
    return { ...block, attrs: { ...block.attrs, id }, ...(lines ? { content: lines } : {}) }
  }
  return { ...block, attrs: { ...block.attrs, id } } as SheetBlock
}

/** Every id of a block or line in reading order, empty ones too. */
export function idsInOrder(document: SheetDocument): string[] {
  return document.content.flatMap(block => block.type === 'calculation' || block.type === 'requirements'
    ? [block.attrs.id, ...(block.content ?? []).map(line => line.attrs.id)]
    : [block.attrs.id])
}
