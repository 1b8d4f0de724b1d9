import { describe, expect, it } from 'vitest'
import { pasteIntoLine, splitPastedLines } from '~/components/sheet/extensions/pasteLines'
import { calculation, caret, caretAt, kindsIn, line, linesIn, paragraph, press, sheet, sheetEditor } from './editor'

function pad(...content: object[]) {
  const { editor } = sheetEditor()
  editor.commands.setContent(sheet(...content))
  return editor
}

describe('keys in a line', () => {
  it('Enter at the end makes the next line', () => {
    const editor = pad(calculation('c', line('a', 'a = 1', 'ref'), line('b', 'b = 2')))
    caretAt(editor, 'source', 0, 5)
    press(editor, 'Enter')
    expect(linesIn(editor)).toEqual(['a = 1 | ref', ' | ', 'b = 2 | '])
    expect(caret(editor)).toBe('source  @0')
  })

  it('Enter in the middle takes the rest along, Backspace joins it again', () => {
    const editor = pad(calculation('c', line('a', 'a = 1 + 2', 'ref')))
    caretAt(editor, 'source', 0, 5)
    press(editor, 'Enter')
    expect(linesIn(editor)).toEqual(['a = 1 | ref', ' + 2 | '])
    press(editor, 'Backspace')
    expect(linesIn(editor)).toEqual(['a = 1 + 2 | ref'])
    expect(caret(editor)).toBe('source a = 1 + 2 @5')
  })

  it('Enter at the start of a formula makes room above, and the formula keeps its reference and mark', () => {
    const editor = pad(calculation('c', line('a', 'a = 1', 'ref', 'given')))
    caretAt(editor, 'source', 0, 0)
    press(editor, 'Enter')
    expect(linesIn(editor)).toEqual([' | ', 'a = 1 | ref'])
    expect(editor.state.doc.child(0).child(1).attrs).toEqual({ id: 'a', status: 'given' })
  })

  it('Enter on an empty last line leaves the block', () => {
    const editor = pad(calculation('c', line('a', 'a = 1'), line('b', '')))
    caretAt(editor, 'source', 1, 0)
    press(editor, 'Enter')
    expect(kindsIn(editor)).toEqual(['calculation', 'paragraph'])
    expect(linesIn(editor)).toEqual(['a = 1 | '])
    expect(caret(editor)).toBe('paragraph  @0')
  })

  it('Backspace at an empty line takes it away; references are never lost', () => {
    const editor = pad(calculation('c', line('a', 'a = 1', 'one'), line('b', '', 'two')))
    caretAt(editor, 'source', 1, 0)
    press(editor, 'Backspace')
    expect(linesIn(editor)).toEqual(['a = 1 | one; two'])
  })

  it('Delete at the end draws the next line up', () => {
    const editor = pad(calculation('c', line('a', 'a = '), line('b', '1', 'ref')))
    caretAt(editor, 'source', 0, 4)
    press(editor, 'Delete')
    expect(linesIn(editor)).toEqual(['a = 1 | ref'])
  })

  it('Tab goes to the reference, to the next formula, and out after the last', () => {
    const editor = pad(calculation('c', line('a', 'a = 1', 'ref'), line('b', 'b = 2', 'last')))
    caretAt(editor, 'source', 0, 2)
    expect(press(editor, 'Tab')).toBe(true)
    expect(caret(editor)).toBe('reference ref @3')
    expect(press(editor, 'Tab')).toBe(true)
    expect(caret(editor)).toBe('source b = 2 @5')
    press(editor, 'Tab')
    expect(press(editor, 'Tab')).toBe(false)
    press(editor, 'Tab', { shiftKey: true })
    expect(caret(editor)).toBe('source b = 2 @5')
  })

  it('Tab makes the reference that a line lacks', () => {
    const editor = pad({ type: 'calculation', attrs: { id: 'c', reference: '' }, content: [{ type: 'line', attrs: { id: 'a', status: null }, content: [{ type: 'source', content: [{ type: 'text', text: 'a = 1' }] }] }] })
    caretAt(editor, 'source', 0, 0)
    press(editor, 'Tab')
    expect(caret(editor)).toBe('reference  @0')
  })

  it('Backspace in empty text under a calculation goes back into it', () => {
    const editor = pad(calculation('c', line('a', 'a = 1')), paragraph('p'))
    caretAt(editor, 'paragraph', 0, 0)
    press(editor, 'Backspace')
    expect(kindsIn(editor)).toEqual(['calculation'])
    expect(caret(editor)).toBe('source a = 1 @5')
  })

  it('Backspace at the start of text under a calculation joins nothing', () => {
    const editor = pad(calculation('c', line('a', 'a = 1')), paragraph('p', 'text'))
    caretAt(editor, 'paragraph', 0, 0)
    press(editor, 'Backspace')
    expect(linesIn(editor)).toEqual(['a = 1 | '])
    expect(kindsIn(editor)).toEqual(['calculation', 'paragraph'])
  })
})

describe('blocks', () => {
  it('go below the block at the caret, or in place of empty text', () => {
    const editor = pad(paragraph('p', 'text'), paragraph('q'))
    caretAt(editor, 'paragraph', 0, 1)
    editor.commands.insertBlock('requirements')
    caretAt(editor, 'paragraph', 1, 0)
    editor.commands.insertBlock('table')
    expect(kindsIn(editor)).toEqual(['paragraph', 'requirements', 'table'])
  })

  it('move, double and go', () => {
    const editor = pad(paragraph('p', 'one'), calculation('c', line('a', 'a = 1'), line('b', 'b = 2')))
    caretAt(editor, 'source', 0, 5)
    editor.commands.moveRow(1)
    expect(linesIn(editor)).toEqual(['b = 2 | ', 'a = 1 | '])
    expect(caret(editor)).toBe('source a = 1 @5')
    editor.commands.duplicateRow()
    expect(linesIn(editor)).toEqual(['b = 2 | ', 'a = 1 | ', 'a = 1 | '])
    editor.commands.removeRow()
    editor.commands.removeRow()
    expect(linesIn(editor)).toEqual(['b = 2 | '])
    editor.commands.removeRow()
    expect(kindsIn(editor)).toEqual(['paragraph'])
  })
})

describe('pasted text', () => {
  it('is split into lines, the reference behind a tab', () => {
    expect(splitPastedLines('a = 1\r\n\n  b = 2 \tIEC 60063\n\tonly a reference\n')).toEqual([
      { source: 'a = 1', reference: '' }, { source: 'b = 2', reference: 'IEC 60063' }, { source: '', reference: 'only a reference' },
    ])
    expect(splitPastedLines('a\u2028b')).toHaveLength(2)
    expect(splitPastedLines(' \n\t\n')).toEqual([])
  })

  it('of several lines goes in at the caret and keeps what stood behind it', () => {
    const editor = pad(calculation('c', line('a', 'x = 1 + 2')))
    caretAt(editor, 'source', 0, 5)
    expect(pasteIntoLine(editor.view, '0\ny = 3\tref\nz = 4')).toBe(true)
    expect(linesIn(editor)).toEqual(['x = 10 | ', 'y = 3 | ref', 'z = 4 + 2 | '])
    expect(caret(editor)).toBe('source z = 4 + 2 @5')
  })

  it('of one line is left to the editor', () => {
    const editor = pad(calculation('c', line('a', 'x = 1')))
    caretAt(editor, 'source', 0, 5)
    expect(pasteIntoLine(editor.view, '+ 2')).toBe(false)
  })
})
