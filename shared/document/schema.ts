import { Schema, type AttributeSpec, type MarkSpec, type NodeSpec } from '@tiptap/pm/model'

/**
 * The sheet's node schema, for the server's validation and as what the editor's extensions are tested against.
 * Content expressions are permissive, since merging two people's edits may produce any order and number of children.
 */

const text = (fallback = ''): AttributeSpec => ({ default: fallback, validate: 'string' })
const flag = (fallback: boolean): AttributeSpec => ({ default: fallback, validate: 'boolean' })

function whole(fallback: number, least: number, most: number): AttributeSpec {
  return {
    default: fallback,
    validate: (value: unknown) => {
      if (typeof value !== 'number' || !Number.isInteger(value) || value < least || value > most) throw new RangeError(`not a whole number from ${least} to ${most}`)
    },
  }
}

function among(fallback: string | null, allowed: readonly (string | null)[]): AttributeSpec {
  return {
    default: fallback,
    validate: (value: unknown) => {
      if (!allowed.some(one => one === value)) throw new RangeError(`not one of ${allowed.join(', ')}`)
    },
  }
}

const widths: AttributeSpec = {
  default: null,
  validate: (value: unknown) => {
    const fits = value === null || (Array.isArray(value) && value.length <= 20 && value.every(width => Number.isInteger(width) && width > 0 && width < 10_000))
    if (!fits) throw new RangeError('not a list of column widths')
  },
}

const LINK = /^(?:https?:\/\/|mailto:)[^\s]+$/i
/** Longest address of a link. */
const LINK_LENGTH = 2000

/** Whether an address may stand in a sheet: only the web and mail. */
export const isAllowedLink = (address: string): boolean => address.length <= LINK_LENGTH && LINK.test(address)

const link: AttributeSpec = {
  default: '',
  validate: (value: unknown) => {
    if (typeof value !== 'string' || !isAllowedLink(value)) throw new RangeError('not an http, https or mailto address')
  },
}

const ATTACHMENT = /^(?:|[0-9A-HJKMNP-TV-Z]{26})$/
const attachment: AttributeSpec = {
  default: '',
  validate: (value: unknown) => {
    if (typeof value !== 'string' || !ATTACHMENT.test(value)) throw new RangeError('not a picture of this project')
  },
}

const block = { id: text(), reference: text() }
const cell = { colspan: whole(1, 1, 50), rowspan: whole(1, 1, 500), colwidth: widths }
const NESTED = '(paragraph | bulletList | orderedList)*'

export const SHEET_NODES: Record<string, NodeSpec> = {
  doc: { content: 'block*' },
  paragraph: { group: 'block', content: 'inline*', attrs: block },
  heading: { group: 'block', content: 'inline*', attrs: { ...block, level: whole(1, 1, 3) } },
  bulletList: { group: 'block', content: 'listItem*', attrs: block },
  orderedList: { group: 'block', content: 'listItem*', attrs: { ...block, start: whole(1, 0, 9999) } },
  listItem: { content: NESTED },
  table: { group: 'block', content: 'tableRow*', attrs: block },
  tableRow: { content: '(tableCell | tableHeader)*' },
  tableCell: { content: NESTED, attrs: cell },
  tableHeader: { content: NESTED, attrs: cell },
  figure: { group: 'block', atom: true, attrs: { ...block, attachment, caption: text(), alt: text() } },
  calculation: { group: 'block', content: 'line*', attrs: block },
  requirements: { group: 'block', content: 'line*', attrs: block },
  line: { content: '(source | reference)*', attrs: { id: text(), status: among(null, [null, 'given', 'assumed', 'hold']) } },
  source: { content: 'text*', marks: '' },
  reference: { content: 'text*', marks: '' },
  response: {
    group: 'block',
    atom: true,
    attrs: {
      ...block, transfer: text(), from: text(), to: text(), showPhase: flag(true), showStep: flag(false), showAsymptotes: flag(true),
      duration: text(), supply: text(), rating: text(), caption: text(),
    },
  },
  inlineMath: { group: 'inline', inline: true, atom: true, attrs: { source: text() } },
  hardBreak: { group: 'inline', inline: true },
  text: { group: 'inline' },
}

/** In the order in which marks stand in a canonical document. */
export const SHEET_MARKS: Record<string, MarkSpec> = {
  link: { attrs: { href: link } },
  bold: {},
  italic: {},
  subscript: {},
  superscript: {},
}

export const sheetSchema = new Schema({ nodes: SHEET_NODES, marks: SHEET_MARKS })
