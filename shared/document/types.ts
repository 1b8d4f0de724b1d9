/**
 * The sheet's document as plain JSON (ProseMirror's shape). The schema itself is in `schema.ts`;
 * block kinds and their attributes are listed here once for the editor, the reader, the freeze and the print.
 */

/** Bumped when a stored document of an earlier version needs a conversion to be read. */
export const DOCUMENT_FORMAT = 1

/** How an input came to be known: by a document, by assumption, or not yet (awaited). The line's reference says which document, why, or from whom. */
export type InputStatus = 'given' | 'assumed' | 'hold'

export interface TextMark { type: 'bold' | 'italic' | 'subscript' | 'superscript' | 'link', attrs?: { href?: string } }
export interface TextNode { type: 'text', text: string, marks?: TextMark[] }
/** Mathematics inside prose, in the syntax of a line; typeset only, never computed. */
export interface InlineMathNode { type: 'inlineMath', attrs: { source: string } }
export type InlineNode = TextNode | InlineMathNode | { type: 'hardBreak' }

/** Attributes of every top-level block: `id` is unique in the sheet, `reference` is its text in the Reference column (lines carry their own). */
export interface BlockAttributes { id: string, reference: string }

export interface SourceNode { type: 'source', content?: TextNode[] }
export interface ReferenceNode { type: 'reference', content?: TextNode[] }
/** One line of calculation. At most one source and one reference; more after a merge is an error at this line. */
export interface LineNode { type: 'line', attrs: { id: string, status: InputStatus | null }, content?: (SourceNode | ReferenceNode)[] }

/** A calculation block or a requirement block; both hold lines, both are evaluated alike. */
export interface LinesBlock { type: 'calculation' | 'requirements', attrs: BlockAttributes, content?: LineNode[] }

export interface ResponseAttributes extends BlockAttributes {
  /** Name of a transfer function defined above. */
  transfer: string
  /** Range of frequency, typed as in a line; empty: chosen from the function. */
  from: string
  to: string
  showPhase: boolean
  showStep: boolean
  showAsymptotes: boolean
  /** Duration of the step response, typed as in a line; empty: chosen. */
  duration: string
  /** Switch-on level at the input and rating of the part at the output, typed as in a line (names allowed); empty: none. They feed the cautions. */
  supply: string
  rating: string
  caption: string
}
export interface ResponseBlock { type: 'response', attrs: ResponseAttributes }

export interface ImageBlock { type: 'figure', attrs: BlockAttributes & { attachment: string, caption: string, alt: string } }
export interface ProseBlock {
  type: 'heading' | 'paragraph' | 'bulletList' | 'orderedList' | 'table'
  attrs: BlockAttributes & { level?: 1 | 2 | 3, start?: number }
  content?: ProseContent[]
}
/** Items, rows and cells below a prose block, and its inline content. */
export type ProseContent = InlineNode
  | { type: 'listItem' | 'tableRow' | 'tableCell' | 'tableHeader' | 'paragraph' | 'bulletList' | 'orderedList', attrs?: Record<string, unknown>, content?: ProseContent[] }

export type SheetBlock = LinesBlock | ResponseBlock | ImageBlock | ProseBlock
export interface SheetDocument { type: 'doc', content: SheetBlock[] }
