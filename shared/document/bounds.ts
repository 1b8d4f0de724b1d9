/** How large a sheet may be. What does not fit is refused with its place, and stays editable. */
export const DOCUMENT_BOUNDS = {
  /** Nodes within nodes; a sheet's deepest is a list in a list in a cell. */
  depth: 32,
  nodes: 50_000,
  /** Characters in one piece of text (a paragraph, a line, an attribute). */
  text: 20_000,
  /** Characters of an id of a block or line, derived ones included. */
  id: 80,
  /** Lines of calculation. */
  lines: 5000,
} as const
