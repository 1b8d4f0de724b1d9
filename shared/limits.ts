/** Bounds of what comes from outside, in one file. Sizes in bytes, times in milliseconds, unless the name says otherwise. */

const KILOBYTE = 1024
const MEGABYTE = 1024 * KILOBYTE

/** Live editing. The server enforces all of these; the client knows them to say so before it happens. */
export const COLLABORATION_LIMITS = {
  /** One socket message. An offline day comes back as one, so it is far above what typing makes. */
  frame: 4 * MEGABYTE,
  /** A document with all its history that cannot be dropped. */
  document: 16 * MEGABYTE,
  /** What one connection may have sent before the server has read its answer to the first question. */
  held: 1 * MEGABYTE,
  /** What one document may have in hand that the database has not taken. */
  queue: 4 * MEGABYTE,
  /** One transaction of the log. */
  batch: 2 * MEGABYTE,
  batchRows: 500,
  /** What may stand unsent to a slow reader before it is cut off and has to come again. */
  unsentToReader: 4 * MEGABYTE,
  /** A person's place in the sheet, as JSON. */
  presence: 2 * KILOBYTE,
  /** Pause between two rounds of places: at most ten a second. */
  presenceEvery: 100,
  /** Sustained messages a second of one connection, and how many at once. */
  framesPerSecond: 100,
  framesAtOnce: 2000,
  bytesPerSecond: 1 * MEGABYTE,
  bytesAtOnce: 16 * MEGABYTE,
  /** Elements within elements. A sheet's deepest is a list in a list in a cell. */
  depth: 32,
  /** Characters, elements and marks that one open page may write in one document. */
  clock: 2 ** 31,
  connectionsPerPerson: 40,
  connectionsPerPersonAndSheet: 12,
  /** A connection that has not answered the server's question by then is cut off. */
  answer: 30_000,
  /** Server's ping; a connection that missed one is dead. */
  heartbeat: 20_000,
  /** How soon an ended session, a lost right or a freeze that another process made is noticed. */
  watch: 1000,
  /** A document nobody has open stays in memory this long. */
  idle: 15_000,
  /** How long commits are tried again before the document is given up and its clients told to come again. */
  giveUp: 20_000,
  /** Rows of the log above which it is folded into a snapshot. */
  foldAfterRows: 1000,
} as const

/** After how long an edit that is still on its way is called *Not saved yet*. */
export const NOT_SAVED_AFTER = 8000
