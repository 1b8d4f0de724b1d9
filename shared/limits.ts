/** Bounds of what comes from outside, in one file. Sizes in bytes, times in milliseconds, unless the name says otherwise. */

const KILOBYTE = 1024
const MEGABYTE = 1024 * KILOBYTE

/** Live editing. The server enforces all of these; the client knows them to say so before it happens. */
export const COLLABORATION_LIMITS = {
  /** One socket message. An offline day comes back as one, so it is far above what typing makes. */
  frame: 4 * MEGABYTE,
  /** Above this the socket itself closes (1009) before anything is read. */
  payload: 8 * MEGABYTE,
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
  /** How long a server that ends waits for the last commits. */
  lastCommits: 5000,
  /** Rows of the log above which it is folded into a snapshot. */
  foldAfterRows: 1000,
  /** The same, once nobody has the document open. */
  foldAtRestRows: 200,
} as const

/** After how long an edit that is still on its way is called *Not saved yet*. */
export const NOT_SAVED_AFTER = 8000

/** What anyone may ask without an account: so many verifications from one address in so many seconds. */
export const VERIFICATION_LIMIT = { points: 30, duration: 60 } as const

/** Requests, accounts and sessions. */
export const LIMITS = {
  /** A JSON body. A document never travels in one. */
  requestBody: 1 * MEGABYTE,
  /** An uploaded file. */
  uploadBody: 12 * MEGABYTE,

  passwordLength: { min: 12, max: 256 },
  nameLength: 120,
  initialsLength: 6,
  emailLength: 191,
  organisationNameLength: 160,

  session: {
    /** Ended when unused for this long. */
    idle: 12 * 60 * 60 * 1000,
    /** Ended this long after signing in, used or not. */
    absolute: 7 * 24 * 60 * 60 * 1000,
    /** How old `last_seen_at` may get before it is written again. */
    seenResolution: 60 * 1000,
  },

  links: {
    invitation: 7 * 24 * 60 * 60 * 1000,
    reset: 60 * 60 * 1000,
    /** Password resets asked for one account within an hour. */
    resetsPerHour: 3,
  },

  signIn: {
    window: 15 * 60 * 1000,
    /** Wrong passwords from one address for one account before each further try has to wait, doubling. */
    pairFree: 5,
    pairLongest: 5 * 60 * 1000,
    /** The same from all addresses together, and from one address for all accounts. */
    accountFree: 50,
    accountWait: 10 * 1000,
    addressFree: 100,
    addressWait: 30 * 1000,
  },

  passwordHashing: { atOnce: 2, waiting: 24 },
} as const
