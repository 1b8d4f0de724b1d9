import { describe, expect, it } from 'vitest'
import * as Y from 'yjs'
import { plainText, storeEpoch, storeName, unsentEdits, unsentUpdate } from '../../../../shared/collab/unsent'

function sheet(): Y.Doc {
  const doc = new Y.Doc()
  const block = new Y.XmlElement('calculation')
  const line = new Y.XmlElement('line')
  const source = new Y.XmlElement('source')
  const paragraph = new Y.XmlElement('paragraph')
  doc.getXmlFragment('sheet').insert(0, [block, paragraph])
  block.setAttribute('id', 'b1')
  block.insert(0, [line])
  line.setAttribute('id', 'l1')
  line.insert(0, [source])
  source.insert(0, [new Y.XmlText('R = 47 ohm')])
  paragraph.setAttribute('id', 'p1')
  paragraph.insert(0, [new Y.XmlText('Text')])
  return doc
}
const textOf = (doc: Y.Doc, at: number): Y.XmlText => {
  let node: unknown = doc.getXmlFragment('sheet').get(at)
  while (node instanceof Y.XmlElement) node = node.get(0)
  return node as Y.XmlText
}
const copyOf = (doc: Y.Doc) => {
  const copy = new Y.Doc()
  Y.applyUpdate(copy, Y.encodeStateAsUpdate(doc))
  return copy
}

describe('unsent edits', () => {
  it('are none when all is confirmed', () => {
    const doc = sheet()
    expect(unsentEdits(doc, Y.snapshot(doc), null)).toEqual({ blocks: [], removals: 0 })
  })

  it('name the line, or the block where there is no line, with its text now', () => {
    const doc = sheet()
    const confirmed = Y.snapshot(doc)
    textOf(doc, 0).insert(4, '1')
    textOf(doc, 1).insert(4, ' more')
    expect(unsentEdits(doc, confirmed, null).blocks).toEqual([
      { blockId: 'b1', lineId: 'l1', kind: 'calculation', text: 'R = 147 ohm' },
      { blockId: 'p1', lineId: null, kind: 'paragraph', text: 'Text more' },
    ])
  })

  it('include what only deletes', () => {
    const doc = sheet()
    const confirmed = Y.snapshot(doc)
    textOf(doc, 0).delete(0, 1)
    expect(unsentEdits(doc, confirmed, null)).toMatchObject({ blocks: [{ lineId: 'l1', text: ' = 47 ohm' }], removals: 0 })
    doc.getXmlFragment('sheet').delete(1, 1)
    expect(unsentEdits(doc, confirmed, null).removals).toBe(1)
  })

  it('are only this person’s when it is known who they are', () => {
    const doc = sheet()
    const confirmed = Y.snapshot(doc)
    const other = copyOf(doc)
    textOf(other, 0).insert(0, 'theirs ')
    Y.applyUpdate(doc, Y.encodeStateAsUpdate(other))
    textOf(doc, 1).insert(0, 'mine ')
    expect(unsentEdits(doc, confirmed, new Set([doc.clientID])).blocks.map(block => block.text)).toEqual(['mine Text'])
    expect(unsentEdits(doc, confirmed, null).blocks).toHaveLength(2)
  })

  it('put back land where they were made, between what others wrote meanwhile', () => {
    const server = sheet()
    const mine = copyOf(server)
    const confirmed = Y.snapshot(mine)
    textOf(mine, 0).insert(4, '(')
    textOf(server, 0).insert(10, ' cold')
    Y.applyUpdate(server, unsentUpdate(mine, confirmed))
    expect(plainText(textOf(server, 0))).toBe('R = (47 ohm cold')
    expect(server.store.pendingStructs).toBeNull()
  })
})

describe('the name of a kept copy', () => {
  it('holds revision, epoch and person, and is read back for these only', () => {
    const name = storeName('REV', 3, 'ANN')
    expect(storeEpoch(name, 'REV', 'ANN')).toBe(3)
    expect(storeEpoch(name, 'REV', 'BOB')).toBeNull()
    expect(storeEpoch(name, 'OTHER', 'ANN')).toBeNull()
    expect(storeEpoch('REV/3/ANN/more', 'REV', 'ANN')).toBeNull()
    expect(storeEpoch('REV/x/ANN', 'REV', 'ANN')).toBeNull()
  })
})
