/** The end of a socket, as far as rooms know it. */
export interface Wire {
  send: (bytes: Uint8Array) => void
  close: (code: number, reason: string) => void
  /** At once, without a closing handshake: for a reader that does not read. */
  terminate: () => void
  ping: () => void
  /** Bytes handed over and not yet taken by the network. */
  waiting: () => number
}

/** Who stands behind a connection, from the session. */
export interface Holder {
  sessionId: string
  userId: string
  name: string
  initials: string
}

/** `write`: edits a draft. `read`: follows a draft. `notices`: is only told that something changed. */
export type Mode = 'write' | 'read' | 'notices'
