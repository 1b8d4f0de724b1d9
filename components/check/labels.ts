/** What a row is called when it cannot be seen: the line as typed, the first words of a paragraph, the caption of a figure. */
import type { ProseContent, SheetBlock, SheetDocument } from '#shared/document/types'
import { isLinesBlock, lineSource } from '#shared/document/read'

const LONGEST = 80

const shortened = (text: string) => text.length > LONGEST ? `${text.slice(0, LONGEST)}…` : text

function textOf(content: readonly ProseContent[] | undefined): string {
  return (content ?? []).map((node) => {
    if (node.type === 'text') return node.text
    if (node.type === 'inlineMath') return node.attrs.source
    return node.type === 'hardBreak' ? ' ' : `${textOf(node.content)} `
  }).join('').trim()
}

function blockLabel(block: SheetBlock): string {
  if (block.type === 'response') return `response of ${block.attrs.transfer}`
  if (block.type === 'figure') return `figure ${block.attrs.caption || block.attrs.alt}`
  if (isLinesBlock(block)) return 'block of lines'
  return block.type === 'table' ? `table ${textOf(block.content)}` : textOf(block.content)
}

/** By id of row, in reading order. */
export function rowLabels(document: SheetDocument): Map<string, string> {
  const rowsOf = (block: SheetBlock): [string, string][] => isLinesBlock(block)
    ? (block.content ?? []).map(line => [line.attrs.id, lineSource(line)])
    : [[block.attrs.id, blockLabel(block)]]
  const rows = document.content.flatMap(rowsOf)
  return new Map(rows.map(([id, label]) => [id, shortened(label) || 'empty line']))
}
