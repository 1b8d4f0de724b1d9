/** Several lines of text pasted into a formula become several lines of calculation; copied lines leave as text. */
import { Extension } from '@tiptap/core'
import { Plugin, PluginKey } from '@tiptap/pm/state'
import type { Node as DocumentNode, Slice } from '@tiptap/pm/model'
import type { EditorView } from '@tiptap/pm/view'
import { lineText } from './lines'
import { caretIntoLine, linePlace, makeLine } from './place'

const MOST_LINES = 2000

export interface PastedLine { source: string, reference: string }

/** Lines of pasted text: blank ones are left out, what stands behind a tab is the reference. */
export function splitPastedLines(text: string): PastedLine[] {
  return text.split(/\r\n|[\n\r\u2028\u2029]/)
    .map((line) => {
      const [source = '', ...rest] = line.split('\t')
      return { source: source.trim(), reference: rest.join(' ').trim() }
    })
    .filter(line => line.source !== '' || line.reference !== '')
    .slice(0, MOST_LINES)
}

/** Whether a copied piece brings lines of its own, with their ids and references. */
function bringsLines(slice: Slice): boolean {
  let found = false
  slice.content.descendants((node) => {
    if (node.type.name === 'line' || node.type.name === 'response') found = true
    return !found
  })
  return found
}

/** Pastes text into the formula at the caret. False where it is a single line or the caret is elsewhere: the editor does that itself. */
export function pasteIntoLine(view: EditorView, text: string): boolean {
  const { state } = view
  const place = linePlace(state)
  const lines = splitPastedLines(text)
  const [first, ...rest] = lines
  if (!place || place.part !== 'source' || !first || (rest.length === 0 && first.reference === '')) return false
  const tr = state.tr.deleteSelection()
  const tail = place.text.slice(state.selection.$to.parentOffset)
  const head = place.start + place.offset
  if (tail) tr.delete(head, head + tail.length)
  tr.insertText(first.source, head)
  let linePos = place.linePos
  if (first.reference && lineText(place.line, 'reference') === '') {
    caretIntoLine(tr, linePos, 'reference', 'end').insertText(first.reference)
  }
  rest.forEach((line) => {
    linePos += tr.doc.nodeAt(linePos)?.nodeSize ?? 0
    tr.insert(linePos, makeLine(state.schema, line.source, line.reference))
  })
  caretIntoLine(tr, linePos, 'source', 'end')
  const end = tr.selection.from
  if (tail) tr.insertText(tail, end)
  caretIntoLine(tr, linePos, 'source', end - tr.selection.$from.start())
  view.dispatch(tr.scrollIntoView().setMeta('paste', true))
  return true
}

const leafText = (leaf: DocumentNode) => leaf.type.name === 'inlineMath' ? `$${String(leaf.attrs.source)}$` : leaf.type.name === 'hardBreak' ? '\n' : ''

/** Copied content as text: a line a line, its reference behind a tab. */
function asText(slice: Slice): string {
  if (slice.content.firstChild?.isInline) return slice.content.textBetween(0, slice.content.size, '\n', leafText)
  const out: string[] = []
  slice.content.descendants((node) => {
    if (node.type.name === 'line') {
      const reference = lineText(node, 'reference')
      out.push(reference ? `${lineText(node, 'source')}\t${reference}` : lineText(node, 'source'))
      return false
    }
    if (node.isTextblock) {
      out.push(node.textBetween(0, node.content.size, '\n', leafText))
      return false
    }
    return true
  })
  return out.join('\n')
}

export const PasteLines = Extension.create({
  name: 'pasteLines',
  priority: 1100,
  addProseMirrorPlugins: () => [
    new Plugin({
      key: new PluginKey('pasteLines'),
      props: {
        handlePaste: (view, event, slice) => {
          const text = event.clipboardData?.getData('text/plain') ?? ''
          return !bringsLines(slice) && pasteIntoLine(view, text)
        },
        clipboardTextSerializer: asText,
      },
    }),
  ],
})
