import { describe, expect, it } from 'vitest'
import * as Y from 'yjs'
import { idBearers, newNodeId } from '~/components/sheet/extensions/identity'
import { calculation, caretAt, line, linesIn, paragraph, press, sheet, sheetEditor } from './editor'

const idsOf = (editor: ReturnType<typeof sheetEditor>['editor']) => idBearers(editor.state.doc).map(bearer => bearer.id)

describe('ids of blocks and lines', () => {
  it('are given to what has none, and to nothing else', () => {
    const { editor } = sheetEditor()
    editor.commands.setContent(sheet(paragraph('p', 'text'), calculation('c', line('', 'a = 1'))))
    const ids = idsOf(editor)
    expect(ids.slice(0, 2)).toEqual(['p', 'c'])
    expect(ids[2]).toMatch(/^[0-9a-z]{16}$/)
  })

  it('stay with the original when a copy comes before it', () => {
    const { editor } = sheetEditor()
    editor.commands.setContent(sheet(paragraph('p', 'text'), calculation('c', line('a', 'a = 1'), line('b', 'b = 2'))))
    editor.commands.insertContentAt(0, calculation('c', line('a', 'a = 1')))
    const ids = idsOf(editor)
    expect(ids.slice(2)).toEqual(['p', 'c', 'a', 'b'])
    expect(ids[0]).not.toBe('c')
    expect(ids[1]).not.toBe('a')
  })

  it('are new for the second half of a split paragraph', () => {
    const { editor } = sheetEditor()
    editor.commands.setContent(sheet(paragraph('p', 'one two')))
    caretAt(editor, 'paragraph', 0, 3)
    press(editor, 'Enter')
    const ids = idsOf(editor)
    expect(ids[0]).toBe('p')
    expect(ids).toHaveLength(2)
    expect(ids[1]).not.toBe('p')
  })

  it('are left alone in what a colleague\'s browser sent', () => {
    const here = sheetEditor()
    const there = new Y.Doc()
    here.editor.commands.setContent(sheet(calculation('c', line('a', 'a = 1'))))
    Y.applyUpdate(there, Y.encodeStateAsUpdate(here.ydoc))
    const block = there.getXmlFragment('sheet').get(0) as Y.XmlElement
    const copy = (block.get(0) as Y.XmlElement).clone() as Y.XmlElement
    block.insert(1, [copy])
    Y.applyUpdate(here.ydoc, Y.encodeStateAsUpdate(there))
    expect(linesIn(here.editor)).toEqual(['a = 1 | ', 'a = 1 | '])
    expect(idsOf(here.editor)).toEqual(['c', 'a', 'a'])
  })

  it('are not given while one only reads', () => {
    const { editor, ydoc } = sheetEditor()
    editor.commands.setContent(sheet(calculation('c', line('a', 'a = 1'))))
    const before = Y.encodeStateAsUpdate(ydoc)
    editor.setEditable(false)
    editor.commands.insertContentAt(0, paragraph('', 'text'))
    editor.commands.insertBlock('table')
    expect(Y.encodeStateAsUpdate(ydoc)).toEqual(before)
  })

  it('do not repeat', () => {
    expect(new Set(Array.from({ length: 2000 }, newNodeId)).size).toBe(2000)
  })
})
