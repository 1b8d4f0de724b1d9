/**
 * What may be said about a person's edits: saved, on their way, or kept on this device. Pure: the facts of one
 * connection go in, the word and its explanation come out. *Saved* is said only when the server has committed
 * every frame of this connection, and the answer to its question (which holds all that was written before) among them.
 */
import { NOT_SAVED_AFTER } from '../limits'
import { CLOSE, type Refused } from './messages'

export interface ConnectionFacts {
  connected: boolean
  /** The server's document has arrived on this connection. */
  synced: boolean
  /** Content frames sent on this connection, and how many of them are committed. */
  sent: number
  upTo: number
  /** Number of the last answer to the server's question, null before the first. */
  answer: number | null
  /** The document was edited after the last connection ended. */
  editedSince: boolean
  /** At least one attempt to connect failed, or a connection was lost. */
  lost: boolean
  /** This device keeps a copy of the document. */
  kept: boolean
  /** When edits began to wait for their acknowledgement, in milliseconds; null when none wait. */
  waitingSince: number | null
  refused: Refused | null
  /** Close code after which no further attempt is made. */
  closed: number | null
}

export const SAVING_KINDS = ['opening', 'saved', 'saving', 'not_saved', 'offline', 'refused', 'frozen', 'signed_out', 'no_right', 'outdated', 'stopped'] as const
export type SavingKind = typeof SAVING_KINDS[number]

export interface SavingState {
  kind: SavingKind
  /** A word or two for the bar. */
  label: string
  /** One sentence for whoever asks; empty when there is nothing to add. */
  help: string
  /** Whether typing still reaches the colleagues, now or later, from this page. */
  editable: boolean
}

export const NO_CONNECTION: ConnectionFacts = {
  connected: false, synced: false, sent: 0, upTo: 0, answer: null, editedSince: false, lost: false, kept: false, waitingSince: null, refused: null, closed: null,
}

/** On this connection nothing is on its way; or nothing was when the last one ended, and nothing was written since. */
export function nothingWaits(facts: ConnectionFacts): boolean {
  return facts.refused === null && !facts.editedSince && facts.answer !== null && facts.upTo >= facts.answer && facts.upTo >= facts.sent
}

/** Every frame is committed, and the answer to the server's question among them. */
export function allCommitted(facts: ConnectionFacts): boolean {
  return facts.connected && facts.synced && nothingWaits(facts)
}

const where = (kept: boolean) => kept
  ? 'What you typed is kept on this device.'
  : 'This browser keeps no copy: leave the page open until it is saved.'

function closedState(code: number, facts: ConnectionFacts): SavingState {
  const kept = where(facts.kept)
  switch (code) {
    case CLOSE.signedOut:
      return { kind: 'signed_out', label: 'Signed out', help: `You were signed out. Sign in again to go on. ${kept}`, editable: false }
    case CLOSE.noRight:
    case CLOSE.notFound:
      return { kind: 'no_right', label: 'No access', help: `You may not open this sheet any more. ${kept}`, editable: false }
    case CLOSE.frozen:
      return { kind: 'frozen', label: 'No longer a draft', help: `This revision was submitted or changed its state. ${kept}`, editable: false }
    case CLOSE.outdated:
      return { kind: 'outdated', label: 'Reload the page', help: `This page is older than the server. Reload it to go on. ${kept}`, editable: false }
    case CLOSE.tooLarge:
      return { kind: 'refused', label: 'Not accepted', help: `The edit is too large to be sent. Make it smaller, then reload the page. ${kept}`, editable: false }
    default:
      return { kind: 'stopped', label: 'Not connected', help: `${facts.refused?.help ?? 'The server ended the connection.'} Reload the page to go on. ${kept}`, editable: false }
  }
}

function offlineState(facts: ConnectionFacts): SavingState {
  return facts.kept
    ? { kind: 'offline', label: 'Offline, kept on this device', help: 'Go on writing; it is sent as soon as the server can be reached.', editable: true }
    : { kind: 'offline', label: 'Offline, kept in this page only', help: where(false), editable: true }
}

/** The word for the bar at time `now` (milliseconds). */
export function savingState(facts: ConnectionFacts, now: number): SavingState {
  if (facts.refused && facts.closed === null) {
    return { kind: 'refused', label: 'Not accepted', help: `${facts.refused.help} ${where(facts.kept)}`, editable: false }
  }
  if (facts.closed !== null) return closedState(facts.closed, facts)
  if (!facts.connected) return facts.lost ? offlineState(facts) : { kind: 'opening', label: 'Opening', help: '', editable: true }
  if (allCommitted(facts)) return { kind: 'saved', label: 'Saved', help: '', editable: true }
  if (facts.waitingSince !== null && now - facts.waitingSince >= NOT_SAVED_AFTER) {
    return { kind: 'not_saved', label: 'Not saved yet', help: `The server has not confirmed your last edits. ${where(facts.kept)}`, editable: true }
  }
  return facts.sent > 0 || facts.synced
    ? { kind: 'saving', label: 'Saving', help: '', editable: true }
    : { kind: 'opening', label: 'Opening', help: '', editable: true }
}
