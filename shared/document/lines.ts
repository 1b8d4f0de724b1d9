import type { LineInput, ResponseRequest, StepRequest } from '../engine/types'
import type { InlineNode, InputStatus, LineNode, LinesBlock, ProseContent, ResponseBlock, SheetBlock, SheetDocument } from './types'

/** What is read out of a sheet's document: its lines for the engine, its rows for the checker, its inputs and their references. Pure. */

export interface SheetLine {
  id: string
  source: string
  reference: string
  status: InputStatus | null
  blockId: string
  /** Whether it stands in a block of requirements. */
  requirements: boolean
}

const isLinesBlock = (block: SheetBlock): block is LinesBlock => block.type === 'calculation' || block.type === 'requirements'
const isResponse = (block: SheetBlock): block is ResponseBlock => block.type === 'response'

/** Text of all children of one kind; two, as a merge may leave them, are both read. */
function lineText(line: LineNode, kind: 'source' | 'reference'): string {
  return (line.content ?? []).filter(child => child.type === kind)
    .map(child => (child.content ?? []).map(part => part.text).join(''))
    .join(' ')
    .trim()
}

/** All lines in reading order, with what stands beside them. */
export function linesOf(document: SheetDocument): SheetLine[] {
  return document.content.filter(isLinesBlock).flatMap(block => (block.content ?? []).map((line): SheetLine => ({
    id: line.attrs.id,
    source: lineText(line, 'source'),
    reference: lineText(line, 'reference'),
    status: line.attrs.status,
    blockId: block.attrs.id,
    requirements: block.type === 'requirements',
  })))
}

/** What the engine is given. */
export const sheetLines = (document: SheetDocument): LineInput[] => linesOf(document).map(({ id, source }) => ({ id, source }))

/** Inputs with how they came to be known. */
export interface SheetInputNote { lineId: string, status: InputStatus, subject: string, reference: string }

export const inputNotes = (document: SheetDocument): SheetInputNote[] => linesOf(document)
  .flatMap(line => (line.status === null || line.source === '' ? [] : [{ lineId: line.id, status: line.status, subject: line.source, reference: line.reference }]))

/** What is still awaited. */
export const holds = (document: SheetDocument): SheetInputNote[] => inputNotes(document).filter(input => input.status === 'hold')

/** What the sheet cites, each with the line or block that cites it. */
export function references(document: SheetDocument): { id: string, text: string }[] {
  return document.content.flatMap((block) => {
    const own = block.attrs.reference.trim()
    const lines = isLinesBlock(block) ? (block.content ?? []).map(line => ({ id: line.attrs.id, text: lineText(line, 'reference') })) : []
    return [...(own ? [{ id: block.attrs.id, text: own }] : []), ...lines.filter(line => line.text !== '')]
  })
}

/** What a response block asks of the engine, and the level and rating that its cautions go by. */
export interface SheetResponse {
  blockId: string
  request: Omit<ResponseRequest, 'points'>
  step: Omit<StepRequest, 'points'> | null
  supply: string
  rating: string
}

export function responseRequests(document: SheetDocument): SheetResponse[] {
  return document.content.filter(isResponse).filter(block => block.attrs.transfer.trim() !== '').map(({ attrs }) => ({
    blockId: attrs.id,
    request: { transfer: attrs.transfer.trim(), from: attrs.from, to: attrs.to },
    step: attrs.showStep ? { transfer: attrs.transfer.trim(), duration: attrs.duration } : null,
    supply: attrs.supply,
    rating: attrs.rating,
  }))
}

/** Ids of the pictures in a sheet. */
export const attachmentIds = (document: SheetDocument): string[] => document.content
  .flatMap(block => (block.type === 'figure' && block.attrs.attachment !== '' ? [block.attrs.attachment] : []))

/** The words of prose, for people; formulas stand as they were typed. */
export function proseText(content: readonly ProseContent[] | undefined): string {
  return (content ?? []).map((node: ProseContent | InlineNode) => {
    if (node.type === 'text') return node.text
    if (node.type === 'inlineMath') return node.attrs.source
    if (node.type === 'hardBreak') return ' '
    return proseText(node.content)
  }).join('')
}

function saysSomething(block: SheetBlock): boolean {
  if (block.type === 'response') return block.attrs.transfer.trim() !== ''
  if (block.type === 'figure') return block.attrs.attachment !== ''
  return !isLinesBlock(block) && proseText(block.content).trim() !== ''
}

/** One thing to be ticked: a line, or a block of prose, a table, a figure or a response as a whole. Headings are not. */
export type TickableRow = { id: string, kind: 'line', line: SheetLine } | { id: string, kind: 'block', block: Exclude<SheetBlock, LinesBlock> }

/** All that a checker goes through, in reading order. Empty lines and blocks are left out. */
export function tickableRows(document: SheetDocument): TickableRow[] {
  const lines = new Map(linesOf(document).map(line => [line.id, line]))
  return document.content.flatMap((block): TickableRow[] => {
    if (!isLinesBlock(block)) return block.type === 'heading' || !saysSomething(block) ? [] : [{ id: block.attrs.id, kind: 'block', block }]
    return (block.content ?? []).flatMap((node): TickableRow[] => {
      const line = lines.get(node.attrs.id)
      return line && (line.source !== '' || line.reference !== '') ? [{ id: line.id, kind: 'line', line }] : []
    })
  })
}
