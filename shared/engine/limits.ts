/** Bounds that turn a hostile line into an error at that line. None of them is a time: the same line meets the same bound everywhere. */
export const LIMITS = {
  /** UTF-16 units in the text of a line. */
  lineLength: 2000,
  /** Tokens in a line. */
  tokens: 800,
  /** Brackets, calls and lists within each other. */
  depth: 40,
  /** Elements of a list. */
  listLength: 1000,
  /** Lines of a sheet. */
  lines: 5000,
  /** Nodes that one line compiles to, with the functions that it calls written out. */
  compiledNodes: 20_000,
  /** Weighted steps that one line may take to evaluate, its tolerance search included. */
  steps: 30_000_000,
  /** Order of a transfer function, numerator or denominator. */
  order: 60,
} as const
