import { describe, expect, it } from 'vitest'
import { prosemirrorJSONToYXmlFragment, yXmlFragmentToProsemirrorJSON } from '@tiptap/y-tiptap'
import * as Y from 'yjs'
import { sheetSchema } from '#shared/document/schema'
import { validateDocument } from '#shared/document/validate'
import { calculation, line, sheet, sheetEditor } from './editor'

const cell = (type: string, text: string) => ({ type, attrs: { colspan: 1, rowspan: 1, colwidth: null }, content: [{ type: 'paragraph', attrs: { id: '', reference: '' }, content: [{ type: 'text', text }] }] })

/** One of everything that a sheet may hold. */
const EVERYTHING = sheet(
  { type: 'heading', attrs: { id: 'h', reference: 'Drg. 12', level: 2 }, content: [{ type: 'text', text: 'Corner' }] },
  {
    type: 'paragraph', attrs: { id: 'p', reference: 'clause 4' }, content: [
      { type: 'text', text: 'bold', marks: [{ type: 'bold' }] },
      { type: 'text', text: 'link', marks: [{ type: 'link', attrs: { href: 'https://example.org/a' } }] },
      { type: 'inlineMath', attrs: { source: 'f_0' } },
      { type: 'hardBreak' },
      { type: 'text', text: 'low', marks: [{ type: 'subscript' }] },
      { type: 'text', text: 'high', marks: [{ type: 'italic' }, { type: 'superscript' }] },
    ],
  },
  { type: 'bulletList', attrs: { id: 'b', reference: '' }, content: [{ type: 'listItem', content: [{ type: 'paragraph', attrs: { id: '', reference: '' }, content: [{ type: 'text', text: 'point' }] }] }] },
  { type: 'orderedList', attrs: { id: 'o', reference: '', start: 3 }, content: [{ type: 'listItem' }] },
  { type: 'table', attrs: { id: 't', reference: '' }, content: [{ type: 'tableRow', content: [cell('tableHeader', 'Case'), cell('tableCell', 'light')] }] },
  { type: 'figure', attrs: { id: 'f', reference: '', attachment: '01ARZ3NDEKTSV4RRFFQ69G5FAV', caption: 'Board', alt: 'A board' } },
  calculation('c', line('l1', 'R = 4.7 kohm', 'maker', 'given'), line('l2', '', '')),
  { type: 'requirements', attrs: { id: 'q', reference: '' }, content: [line('l3', 'R > 1 ohm', 'clause 2')] },
  {
    type: 'response', attrs: {
      id: 'r', reference: '', transfer: 'H', from: '1 Hz', to: '', showPhase: false, showStep: true, showAsymptotes: false,
      duration: '1 ms', supply: '24 V', rating: 'V_r', caption: 'Response',
    },
  },
)

describe('the editor and the document', () => {
  it('has the nodes, marks, attributes and defaults of the sheet\'s schema', () => {
    const { editor } = sheetEditor()
    const described = (schema: typeof sheetSchema) => ({
      nodes: Object.fromEntries(Object.entries(schema.nodes).sort().map(([name, type]) => [name, type.spec.attrs
        ? Object.fromEntries(Object.entries(type.spec.attrs).filter(([attribute]) => attribute !== 'dir').map(([attribute, spec]) => [attribute, spec.default]))
        : {}])),
      marks: Object.fromEntries(Object.entries(schema.marks).sort().map(([name, type]) => [name, Object.keys(type.spec.attrs ?? {})])),
    })
    expect(described(editor.schema)).toEqual(described(sheetSchema))
  })

  it('gives back the document it was given, and one that the server accepts', () => {
    const ydoc = new Y.Doc()
    prosemirrorJSONToYXmlFragment(sheetSchema, EVERYTHING, ydoc.getXmlFragment('sheet'))
    const { editor } = sheetEditor(ydoc)
    const before = yXmlFragmentToProsemirrorJSON(ydoc.getXmlFragment('sheet'))
    const expected = validateDocument(EVERYTHING)
    expect(expected.ok).toBe(true)
    expect(validateDocument(editor.getJSON())).toEqual(expected)
    expect(yXmlFragmentToProsemirrorJSON(ydoc.getXmlFragment('sheet'))).toEqual(before)
  })

  it('accepts whatever order a merge leaves, without taking anything away', () => {
    const ydoc = new Y.Doc()
    const odd = sheet(
      { type: 'calculation', attrs: { id: 'c', reference: '' } },
      { type: 'calculation', attrs: { id: 'd', reference: '' }, content: [{ type: 'line', attrs: { id: 'l', status: null }, content: [
        { type: 'reference', content: [{ type: 'text', text: 'first' }] }, { type: 'source', content: [{ type: 'text', text: 'a = 1' }] }, { type: 'source', content: [{ type: 'text', text: 'b = 2' }] },
      ] }] },
      { type: 'bulletList', attrs: { id: 'e', reference: '' } },
      { type: 'table', attrs: { id: 't', reference: '' }, content: [{ type: 'tableRow', content: [{ type: 'tableCell', attrs: { colspan: 1, rowspan: 1, colwidth: null } }] }] },
    )
    prosemirrorJSONToYXmlFragment(sheetSchema, odd, ydoc.getXmlFragment('sheet'))
    const { editor } = sheetEditor(ydoc)
    const lines = editor.getText()
    expect(lines).toContain('a = 1')
    expect(lines).toContain('b = 2')
    expect(editor.state.doc.childCount).toBe(4)
    expect(editor.view.dom.textContent).toContain('Two formulas met in one line')
  })
})
