import { describe, expect, it } from 'vitest'
import * as Y from 'yjs'
import { hashOf } from '../../../../shared/document/canonical'
import { idsInOrder } from '../../../../shared/document/identity'
import { DocumentOutOfBounds, measureTree, readDocument, type RawNode } from '../../../../shared/document/tree'
import { validateDocument } from '../../../../shared/document/validate'
import { createInitialUpdate, FRAGMENT } from '../../../../shared/document/yjs'
import type { SheetDocument } from '../../../../shared/document/types'

const text = (value: string, ...marks: { type: string, attrs?: object }[]) => ({ type: 'text', text: value, ...(marks.length > 0 ? { marks } : {}) })
const paragraph = (id: string, ...content: object[]): RawNode => ({ type: 'paragraph', attrs: { id, reference: '' }, content })
const line = (id: string, ...content: object[]): RawNode => ({ type: 'line', attrs: { id, status: null }, content })
const source = (value: string) => ({ type: 'source', content: [text(value)] })
const doc = (...content: RawNode[]): RawNode => ({ type: 'doc', content })
const calculation = (id: string, ...lines: RawNode[]): RawNode => ({ type: 'calculation', attrs: { id, reference: '' }, content: lines })

function sound(raw: RawNode): SheetDocument {
  const outcome = validateDocument(raw)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.problems))
  return outcome.document
}
const problems = (raw: RawNode) => {
  const outcome = validateDocument(raw)
  return outcome.ok ? [] : outcome.problems
}

function throughYjs(document: SheetDocument): RawNode {
  const ydoc = new Y.Doc()
  Y.applyUpdate(ydoc, createInitialUpdate(document))
  return readDocument(ydoc)
}

const EVERYTHING = doc(
  { type: 'heading', attrs: { id: 'h', reference: '', level: 2 }, content: [text('Corner of '), { type: 'inlineMath', attrs: { source: 'f_c' } }] },
  paragraph('p', text('a', { type: 'italic' }, { type: 'bold' }), text('see', { type: 'link', attrs: { href: 'https://norrsund.example' } }), { type: 'hardBreak' }),
  { type: 'bulletList', attrs: { id: 'b', reference: 'IEC 60063' }, content: [{ type: 'listItem', content: [{ type: 'paragraph', content: [text('x')] }] }] },
  { type: 'orderedList', attrs: { id: 'o', reference: '', start: 3 }, content: [{ type: 'listItem', content: [{ type: 'paragraph', content: [text('y')] }] }] },
  { type: 'table', attrs: { id: 't', reference: '' }, content: [{ type: 'tableRow', content: [{ type: 'tableHeader', attrs: { colspan: 2 }, content: [{ type: 'paragraph', content: [text('z')] }] }] }] },
  calculation('c', { type: 'line', attrs: { id: 'l', status: 'given' }, content: [source('R = 1 kohm'), { type: 'reference', content: [text('data sheet')] }] }),
  { type: 'requirements', attrs: { id: 'q', reference: '' }, content: [line('m', source('R <= 2 kohm'))] },
  { type: 'response', attrs: { id: 'r', reference: '', transfer: 'H', from: '', to: '', showPhase: true, showStep: false, showAsymptotes: true, duration: '', supply: '', rating: '', caption: '' } },
  { type: 'figure', attrs: { id: 'f', reference: '', attachment: '01J00000000000000000000000', caption: 'c', alt: 'a' } },
)

describe('a sheet', () => {
  it('of every kind of block goes to Yjs and back without a change', () => {
    const document = sound(EVERYTHING)
    expect(sound(throughYjs(document))).toEqual(document)
  })

  it('means the same however marks are ordered, texts divided and defaults written out', () => {
    const divided = doc(paragraph('p', text('ab', { type: 'bold' }, { type: 'italic' }), text('c', { type: 'italic', attrs: {} }, { type: 'bold', attrs: {} }), text('d')))
    const whole = doc(paragraph('p', text('abc', { type: 'italic' }, { type: 'bold' }), text('d')))
    expect(hashOf(sound(divided))).toBe(hashOf(sound(whole)))
    const nested = (attrs?: object) => doc({ type: 'bulletList', attrs: { id: 'b', reference: '' }, content: [{ type: 'listItem', content: [{ type: 'paragraph', ...(attrs ? { attrs } : {}), content: [text('x')] }] }] })
    expect(hashOf(sound(nested({ id: '', reference: '' })))).toBe(hashOf(sound(nested())))
  })

  it('keeps text of lines plain', () => {
    expect(sound(doc(calculation('c', line('l', { type: 'source', content: [text('R', { type: 'bold' })] })))))
      .toEqual(sound(doc(calculation('c', line('l', source('R'))))))
  })

  it('gives later duplicates of an id, and nodes without one, the same new id at every reading', () => {
    const raw = doc(paragraph('p', text('1')), paragraph('p', text('2')), paragraph('', text('3')), calculation('p', line('p', source('R = 1'))))
    const document = sound(raw)
    const ids = document.content.map(block => block.attrs.id)
    expect(ids[0]).toBe('p')
    expect(new Set(idsInOrder(document)).size).toBe(5)
    expect(idsInOrder(document)).toHaveLength(5)
    expect(sound(raw)).toEqual(document)
  })

  it('never takes an id away from a first bearer that comes later', () => {
    const ids = sound(doc(paragraph('p', text('1')), paragraph('p', text('2')), paragraph('p.2', text('3')))).content.map(block => block.attrs.id)
    expect(ids[2]).toBe('p.2')
    expect(new Set(ids).size).toBe(3)
  })
})

describe('what does not fit is refused at its place', () => {
  it.each<[string, RawNode]>([
    ['an unknown block', { type: 'script', attrs: { id: 'x' }, content: [] }],
    ['an attribute of another type', { type: 'heading', attrs: { id: 'x', reference: '', level: [1] }, content: [] }],
    ['a level that there is not', { type: 'heading', attrs: { id: 'x', reference: '', level: 9 }, content: [] }],
    ['a link that is a program', paragraph('x', text('y', { type: 'link', attrs: { href: 'javascript:alert(1)' } }))],
    ['a link to a file', paragraph('x', text('y', { type: 'link', attrs: { href: 'file:///etc/hosts' } }))],
    ['a mark that there is not', paragraph('x', text('y', { type: 'blink' }))],
    ['a picture by address', { type: 'figure', attrs: { id: 'x', reference: '', attachment: 'https://elsewhere.example/a.png', caption: '', alt: '' } }],
    ['a line in a paragraph', paragraph('x', { type: 'line', attrs: { id: 'y', status: null } })],
    ['a status that there is not', { ...calculation('x'), content: [{ type: 'line', attrs: { id: 'x', status: 'guessed' } }] }],
    ['an embedded object in a text', paragraph('x', { type: 'text', text: { image: 1 } })],
  ])('%s', (_name, block) => {
    expect(problems(doc(paragraph('fine', text('fine')), block))).toMatchObject([{ lineId: 'x' }])
  })

  it('a line with two formulas after a merge', () => {
    expect(problems(doc(calculation('c', line('l', source('R = 1'), source('R = 2')))))).toMatchObject([{ lineId: 'l', what: expect.stringContaining('more than one formula') as unknown }])
  })

  it('a character cut in half', () => {
    expect(problems(doc(paragraph('x', text('a\ud83d'))))).toMatchObject([{ lineId: 'x', what: expect.stringContaining('cut in half') as unknown }])
  })

  it('a text without end', () => {
    expect(problems(doc(paragraph('x', text('a'.repeat(20_001)))))).toMatchObject([{ lineId: 'x' }])
  })

  it('nesting that would exhaust a stack, without being exhausted itself', () => {
    let node: RawNode = paragraph('p', text('deep'))
    for (let i = 0; i < 20_000; i++) node = { type: 'bulletList', content: [{ type: 'listItem', content: [node] }] }
    expect(() => measureTree(doc(node))).toThrow(DocumentOutOfBounds)
    expect(problems(doc(node))).toMatchObject([{ lineId: null }])
    const ydoc = new Y.Doc()
    const fragment = ydoc.getXmlFragment(FRAGMENT)
    let parent: Y.XmlFragment = fragment
    for (let i = 0; i < 200; i++) {
      const child = new Y.XmlElement('bulletList')
      parent.insert(0, [child])
      parent = child
    }
    expect(() => readDocument(ydoc)).toThrow(DocumentOutOfBounds)
  })

  it('more parts than a sheet may have', () => {
    expect(problems(doc(...Array.from({ length: 25_001 }, (_, i) => paragraph(`p${i}`, text('x')))))).toMatchObject([{ lineId: null }])
  })
})
