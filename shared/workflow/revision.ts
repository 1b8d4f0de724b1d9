/**
 * The state machine of a revision: which event may happen in which state, and where it leads.
 * Pure; who may cause an event is in `shared/policies`.
 */

export const REVISION_STATES = [
  'draft', 'for_checking', 'checked', 'issuing', 'issued', 'superseded', 'withdrawn', 'cancelled',
] as const
export type RevisionState = typeof REVISION_STATES[number]

export const REVISION_EVENTS = [
  'submit', 'recall', 'return', 'sign', 'approve', 'pdf_stored', 'issue_given_up', 'supersede', 'withdraw', 'cancel',
] as const
export type RevisionEvent = typeof REVISION_EVENTS[number]

/** Words for a person. */
export const STATE_LABELS: Record<RevisionState, string> = {
  draft: 'Draft',
  for_checking: 'For checking',
  checked: 'Checked',
  issuing: 'Issuing',
  issued: 'Issued',
  superseded: 'Superseded',
  withdrawn: 'Withdrawn',
  cancelled: 'Cancelled',
}

const TRANSITIONS: Record<RevisionState, Partial<Record<RevisionEvent, RevisionState>>> = {
  draft: { submit: 'for_checking', cancel: 'cancelled' },
  for_checking: { recall: 'draft', return: 'draft', sign: 'checked' },
  checked: { return: 'draft', approve: 'issuing' },
  issuing: { pdf_stored: 'issued', issue_given_up: 'checked' },
  issued: { supersede: 'superseded', withdraw: 'withdrawn' },
  superseded: { withdraw: 'withdrawn' },
  withdrawn: {},
  cancelled: {},
}

export type TransitionOutcome =
  | { ok: true, state: RevisionState }
  | { ok: false, code: 'wrong_state', state: RevisionState, event: RevisionEvent }

/** The state after `event` in `state`, or a refusal naming both. */
export function transition(state: RevisionState, event: RevisionEvent): TransitionOutcome {
  const next = TRANSITIONS[state][event]
  return next ? { ok: true, state: next } : { ok: false, code: 'wrong_state', state, event }
}

/** Events that may happen in `state`, in the order of `REVISION_EVENTS`. */
export function possibleEvents(state: RevisionState): RevisionEvent[] {
  return REVISION_EVENTS.filter(event => TRANSITIONS[state][event] !== undefined)
}
