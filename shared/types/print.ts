import type { SheetDocument } from '../document/types'
import type { ResponseFigures, SheetResult, StepFigures } from '../engine/types'
import type { IssuePurpose, RevisionView, SheetSettings, SignatureMeaning, SubmissionView } from './api'

/** What a title block says. */
export type TitleBlockView = Pick<RevisionView,
  | 'number' | 'title' | 'revision' | 'state' | 'jobNumber' | 'projectTitle' | 'clientName' | 'checkLevel' | 'purpose' | 'reasonForRevision'
  | 'preparedBy' | 'preparedAt' | 'checker' | 'checkedBy' | 'checkedAt' | 'approvedBy' | 'approvedAt' | 'issuedAt' | 'due'>

/** Everything that stands on an issued sheet, fixed when it is approved. */
export interface PrintView {
  revision: TitleBlockView
  paper: SheetSettings['paper']
  firm: string
  purpose: IssuePurpose
  /** Time of the approval, ISO 8601: the date on the stamp. */
  approvedAt: string
  code: string
  /** What the QR code holds and the footer says. */
  verifyUrl: string
  qr: { size: number, path: string }
  relianceNotice: string
  contentHash: string
  resultsHash: string
  engine: { version: string, hash: string }
  document: SheetDocument
  results: SheetResult
  /** By block. */
  figures: Record<string, { response: ResponseFigures | null, step: StepFigures | null, failed: string | null }>
  /** LaTeX of the formulas in prose, by their source. */
  maths: Record<string, string>
  cautions: { message: string }[]
  acceptances: SubmissionView['acceptances']
  signatures: PrintedSignature[]
  /** All revisions that were ever issued, this one last. */
  history: PrintedRevision[]
  /** Rows whose content differs from the revision issued before. */
  changed: string[]
}

export interface PrintedSignature { meaning: SignatureMeaning, name: string, at: string, statement: string, hash: string }

export interface PrintedRevision { revision: string, date: string, purpose: IssuePurpose, reason: string | null, prepared: string, checked: string, approved: string }
