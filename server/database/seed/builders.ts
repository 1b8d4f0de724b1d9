import { createHash } from 'node:crypto'
import type {
  InlineNode, InputStatus, LineNode, LinesBlock, ProseBlock, ResponseAttributes, ResponseBlock, SheetBlock, SheetDocument,
} from '../../../shared/document/types'

/** A block before it has an id: `sheetDocument` gives ids from the sheet's number and the block's place, so that a second load makes the same document. */
type Draft<T> = (id: (kind: string) => string) => T

export interface SeedLine { source: string, reference?: string, status?: InputStatus }

function deterministicId(seed: string): string {
  return createHash('sha256').update(seed).digest('hex').slice(0, 20)
}

function text(content: string): InlineNode[] {
  if (!content) return []
  return content.split(/(\$[^$]+\$)/).filter(Boolean).map(part =>
    part.startsWith('$')
      ? { type: 'inlineMath', attrs: { source: part.slice(1, -1) } }
      : { type: 'text', text: part })
}

export function heading(content: string, level: 1 | 2 | 3 = 1): Draft<ProseBlock> {
  return id => ({ type: 'heading', attrs: { id: id('heading'), reference: '', level }, content: text(content) })
}

/** Prose; `$…$` is inline mathematics in the syntax of a line. */
export function paragraph(content: string, reference = ''): Draft<ProseBlock> {
  return id => ({ type: 'paragraph', attrs: { id: id('paragraph'), reference }, content: text(content) })
}

export function bullets(items: string[], reference = ''): Draft<ProseBlock> {
  return id => ({
    type: 'bulletList',
    attrs: { id: id('list'), reference },
    content: items.map(item => ({ type: 'listItem', content: [{ type: 'paragraph', content: text(item) }] })),
  })
}

/** The first row is the header. */
export function table(rows: string[][], reference = ''): Draft<ProseBlock> {
  return id => ({
    type: 'table',
    attrs: { id: id('table'), reference },
    content: rows.map((row, index) => ({
      type: 'tableRow',
      content: row.map(cell => ({
        type: index === 0 ? 'tableHeader' as const : 'tableCell' as const,
        content: [{ type: 'paragraph', content: text(cell) }],
      })),
    })),
  })
}

function lineNode(line: SeedLine, id: string): LineNode {
  const reference = line.reference ?? ''
  return {
    type: 'line',
    attrs: { id, status: line.status ?? null },
    content: [
      { type: 'source', content: line.source ? [{ type: 'text', text: line.source }] : undefined },
      { type: 'reference', content: reference ? [{ type: 'text', text: reference }] : undefined },
    ],
  }
}

function linesBlock(type: LinesBlock['type'], lines: SeedLine[]): Draft<LinesBlock> {
  return (id) => {
    const block = id(type)
    return { type, attrs: { id: block, reference: '' }, content: lines.map((line, index) => lineNode(line, deterministicId(`${block}/${index}`))) }
  }
}

export const calculation = (lines: SeedLine[]): Draft<LinesBlock> => linesBlock('calculation', lines)
export const requirements = (lines: SeedLine[]): Draft<LinesBlock> => linesBlock('requirements', lines)

export function response(attributes: Partial<ResponseAttributes> & { transfer: string }): Draft<ResponseBlock> {
  return id => ({
    type: 'response',
    attrs: {
      id: id('response'), reference: '', from: '', to: '', showPhase: true, showStep: false, showAsymptotes: false,
      duration: '', supply: '', rating: '', caption: '', ...attributes,
    },
  })
}

/** A known input: by a document, by assumption, or awaited. */
export const given = (source: string, reference: string): SeedLine => ({ source, reference, status: 'given' })
export const assumed = (source: string, reference: string): SeedLine => ({ source, reference, status: 'assumed' })
export const hold = (source: string, reference: string): SeedLine => ({ source, reference, status: 'hold' })
export const line = (source: string, reference = ''): SeedLine => ({ source, reference })

export function sheetDocument(number: string, blocks: Draft<SheetBlock>[]): SheetDocument {
  return {
    type: 'doc',
    content: blocks.map((block, index) => block(kind => deterministicId(`${number}/${index}/${kind}`))),
  }
}
