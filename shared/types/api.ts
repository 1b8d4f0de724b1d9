/** What leaves the server: the shapes that presenters fill and pages read. Dates are ISO 8601 in UTC. */
import type { RevisionState } from '../workflow/revision'
import type { SheetDocument } from '../document/types'
import type { SheetResult, Verdict } from '../engine/types'

export type Role = 'engineer' | 'checker' | 'manager' | 'client'
export type IssuePurpose = 'information' | 'comment' | 'approval' | 'construction' | 'as_built'
export type CheckLevel = 1 | 2 | 3
export type SignatureMeaning = 'prepared' | 'checked' | 'approved'
export type AnnotationKind = 'must_change' | 'query' | 'remark'
export type AnnotationState = 'open' | 'answered' | 'closed'

export interface PersonRef { id: string, name: string, initials: string }

export interface SessionView {
  user: PersonRef & { email: string, roles: Role[], organisation: { id: string, name: string } | null }
  /** Whether letters stay in the demonstration's outbox and this person may read it there. */
  outbox: boolean
  /** Where this person's work list is: `/work`, `/queue`, `/board` or `/issued`. */
  home: string
}

export interface ProjectSummary {
  id: string, jobNumber: string, title: string
  client: { id: string, name: string } | null
  sheetCount: number, openCount: number
  members: PersonRef[]
  updatedAt: string
}
export interface ProjectDetail extends ProjectSummary {
  managers: PersonRef[]
  revisionScheme: 'letters' | 'numbers'
  checkLevel: CheckLevel
  relianceNotice: string
  archived: boolean
  abilities: { edit: boolean, createSheet: boolean }
}

/** A standard with its edition, or a client's document with its revision, that sheets of the project cite. */
export interface ProjectReferenceView { id: string, kind: 'standard' | 'client_document' | 'other', designation: string, title: string, edition: string }

/** A row of a register, a board or a work list. */
export interface RegisterRow {
  sheetId: string, revisionId: string
  projectId: string, jobNumber: string, projectTitle: string
  number: string, title: string, revision: string, state: RevisionState
  preparedBy: PersonRef | null, checkedBy: PersonRef | null, approvedBy: PersonRef | null
  checker: PersonRef | null, awaiting: PersonRef | null
  /** Since when it is in this state, and due when (date only) if someone is asked. */
  since: string, due: string | null
  /** Working days in this state. */
  age: number
  ticked: number | null, lines: number | null
  openMustChange: number
  returnReason: string | null
  issuedAt: string | null, purpose: IssuePurpose | null, code: string | null
}

export interface SignatureView {
  id: string, meaning: SignatureMeaning, by: PersonRef, at: string, hash: string, statement: string
  void: boolean, voidReason: string | null
}

/** The title block and everything about one revision except its content. */
export interface RevisionView {
  id: string, sheetId: string, projectId: string, version: number
  number: string, title: string, revision: string, state: RevisionState
  jobNumber: string, projectTitle: string, clientName: string | null
  checkLevel: CheckLevel, purpose: IssuePurpose | null, reasonForRevision: string | null
  preparedBy: PersonRef | null, preparedAt: string | null
  checker: PersonRef | null, checkedBy: PersonRef | null, checkedAt: string | null
  approvedBy: PersonRef | null, approvedAt: string | null, issuedAt: string | null
  due: string | null, since: string, returnReason: string | null
  contributors: (PersonRef & { inherited: boolean })[]
  signatures: SignatureView[]
  revisions: { id: string, revision: string, state: RevisionState, issuedAt: string | null, reason: string | null }[]
  submissionId: string | null, submissionHash: string | null
  settings: SheetSettings
  code: string | null, pdfHash: string | null
  epoch: number
  abilities: Record<RevisionAbility, Ability>
}
export type RevisionAbility = 'edit' | 'submit' | 'recall' | 'annotate' | 'tick' | 'return' | 'sign' | 'approve' | 'withdraw' | 'revise' | 'download' | 'reassign' | 'cancel' | 'rename'
/** A button and a route never disagree: `why` is what the server would answer. */
export type Ability = { may: true } | { may: false, why: string, code?: 'not_allowed' | 'wrong_state' }

export interface SheetSettings { significantDigits: number, paper: 'A4' | 'Letter' }

/** The frozen content of a revision. */
export interface SubmissionView {
  id: string, revisionId: string, hash: string, resultsHash: string, submittedAt: string
  submittedBy: PersonRef, document: SheetDocument, results: SheetResult
  settings: SheetSettings
  cautions: { code: string, message: string, lineId: string | null }[]
  engine: { version: string, hash: string }
  lines: { lineId: string, hash: string, order: number, kind: 'line' | 'block' }[]
  acceptances: { lineId: string | null, what: string, reason: string, by: PersonRef }[]
}

export interface TickView { lineId: string, by: PersonRef, at: string }

export interface AnnotationView {
  id: string, number: number, kind: AnnotationKind, state: AnnotationState
  by: PersonRef, at: string, text: string
  anchor: { blockId: string | null, quote: string, from: number | null, to: number | null }
  replies: { id: string, by: PersonRef, at: string, text: string }[]
  abilities: { reply: boolean, close: boolean, reopen: boolean }
}

/**
 * What stands between a draft and its submission. `mustMend`: it cannot be submitted as it is. Otherwise errors, requirements and
 * references are mended or accepted with a reason; holds and cautions are only told.
 */
export interface SubmitFinding { lineId: string | null, kind: 'error' | 'requirement' | 'reference' | 'hold' | 'caution', what: string, mustMend: boolean }

/** A draft computed on the server as it would be frozen. `hash` is null while something in it must be mended first. */
export interface SubmitReview {
  findings: SubmitFinding[]
  hash: string | null
  seq: number
  /** Who else has written in it within the last minutes. */
  editors: PersonRef[]
}

export interface VerificationView {
  genuine: boolean
  code: string
  sheet?: { number: string, title: string, revision: string, jobNumber: string, projectTitle: string, purpose: IssuePurpose, issuedAt: string, state: RevisionState }
  firm?: string
  contentHash?: string
  pdfHash?: string
  supersededBy?: { revision: string, issuedAt: string } | null
  signatures?: { meaning: SignatureMeaning, name: string, at: string }[]
}

export interface RequirementLine { lineId: string, number: number, verdict: Verdict, subject: string, margin: string }
