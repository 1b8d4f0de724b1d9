import type { Node as DocumentNode } from '@tiptap/pm/model'
import { lineText } from './extensions/lines'
import { isLinesBlock } from './extensions/place'
import type { LineInput } from '#shared/engine/types'

/** Nodes never change, so that a line that was read once is read for good. */
const known = new WeakMap<DocumentNode, LineInput>()

function lineOf(node: DocumentNode): LineInput {
  const present = known.get(node)
  if (present) return present
  const line = { id: String(node.attrs.id), source: lineText(node, 'source') }
  known.set(node, line)
  return line
}

/** Lines of the sheet in reading order, for the engine. */
export function linesOf(doc: DocumentNode): LineInput[] {
  const lines: LineInput[] = []
  doc.forEach((block) => {
    if (isLinesBlock(block)) block.forEach(line => lines.push(lineOf(line)))
  })
  return lines
}
