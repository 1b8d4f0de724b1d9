import { isStaff, type Actor } from '#shared/policies/actor'
import { abilities } from '#shared/policies/revisions'
import type { RevisionView, SignatureMeaning, SignatureView, SubmissionView } from '#shared/types/api'
import type { SheetContent } from '#shared/document/canonical'
import type { SheetResult } from '#shared/engine/types'
import type { Acceptance, Contributor, Signature, Submission, SubmissionLine } from '../database'
import type { KnownPerson } from '../database/queries/people'
import type { RevisionDetail } from '../database/queries/revisionView'
import { personRef } from './register'

type People = ReadonlyMap<string, KnownPerson>

/** Who signed is shown by the name under which they signed. */
function presentSignature(row: Signature, people: People): SignatureView {
  return {
    id: row.id, meaning: row.meaning,
    by: { id: row.userId, name: row.signerName, initials: people.get(row.userId)?.initials ?? '' },
    at: row.signedAt.toISOString(), hash: row.hash, statement: row.statement,
    void: row.voidedAt !== null, voidReason: row.voidReason,
  }
}

function titleBlock({ record }: RevisionDetail) {
  const { revision, sheet, project, submission } = record
  return {
    id: revision.id, sheetId: sheet.id, projectId: project.id, version: revision.version,
    ...(submission?.titleBlock ?? { number: sheet.number, title: sheet.title, settings: sheet.settings }),
    revision: revision.label, state: revision.state,
    jobNumber: project.jobNumber, projectTitle: project.title, checkLevel: sheet.checkLevel,
    purpose: revision.purpose, reasonForRevision: revision.reason, since: revision.since.toISOString(),
  }
}

function signatories({ record, signatures, people }: RevisionDetail) {
  const standing = (meaning: SignatureMeaning) => {
    const row = signatures.find(one => one.meaning === meaning && one.voidedAt === null && one.submissionId === record.submission?.id)
    return row ? presentSignature(row, people) : null
  }
  const prepared = standing('prepared')
  const checked = standing('checked')
  const approved = standing('approved')
  return {
    preparedBy: prepared?.by ?? personRef(people, record.revision.authorId), preparedAt: prepared?.at ?? null,
    checkedBy: checked?.by ?? null, checkedAt: checked?.at ?? null,
    approvedBy: approved?.by ?? null, approvedAt: approved?.at ?? null,
  }
}

function otherRevisions({ record, revisions, issues }: RevisionDetail, staff: boolean): RevisionView['revisions'] {
  return revisions
    .filter(one => staff || one.id === record.revision.id || issues.some(issue => issue.revisionId === one.id))
    .map(one => ({
      id: one.id, revision: one.label, state: one.state, reason: one.reason,
      issuedAt: issues.find(issue => issue.revisionId === one.id)?.issuedAt?.toISOString() ?? null,
    }))
}

function presentContributors(contributors: readonly Contributor[], people: People): RevisionView['contributors'] {
  return contributors.flatMap(({ userId, inherited }) => {
    const person = personRef(people, userId)
    return person ? [{ ...person, inherited }] : []
  })
}

/** A client sees what stands on the issued sheet; the firm's own work on it stays in the firm. */
export function presentRevision(actor: Actor, detail: RevisionDetail): RevisionView {
  const { record, client, signatures, issues, people } = detail
  const { revision, contributors, submission, doc, facts } = record
  const staff = isStaff(actor)
  const issue = issues.find(one => one.revisionId === revision.id)
  return {
    ...titleBlock(detail), ...signatories(detail), clientName: client?.name ?? null,
    checker: staff ? personRef(people, revision.checkerId) : null,
    issuedAt: issue?.issuedAt?.toISOString() ?? null,
    due: staff ? revision.dueDate : null,
    returnReason: staff || revision.state === 'withdrawn' ? revision.returnedReason : null,
    contributors: staff ? presentContributors(contributors, people) : [],
    signatures: signatures.filter(row => staff || row.voidedAt === null).map(row => presentSignature(row, people)),
    revisions: otherRevisions(detail, staff),
    submissionId: submission?.id ?? null, submissionHash: submission?.contentHash ?? null,
    code: issue?.code ?? null, pdfHash: issue?.pdfHash ?? null,
    epoch: doc.epoch,
    abilities: abilities(actor, facts),
  }
}

export interface SubmissionDetail { submission: Submission, lines: SubmissionLine[], acceptances: Acceptance[], people: People }

const unknownPerson = { id: '', name: '', initials: '' }

export function presentSubmission({ submission, lines, acceptances, people }: SubmissionDetail): SubmissionView {
  const content = JSON.parse(submission.contentJson) as SheetContent
  return {
    id: submission.id, revisionId: submission.revisionId, hash: submission.contentHash, resultsHash: submission.resultsHash,
    submittedAt: submission.createdAt.toISOString(), submittedBy: personRef(people, submission.submittedBy) ?? unknownPerson,
    document: content.document, results: JSON.parse(submission.shownJson) as SheetResult,
    settings: submission.titleBlock.settings,
    cautions: JSON.parse(submission.cautionsJson) as SubmissionView['cautions'],
    engine: { version: submission.engineVersion, hash: submission.engineHash },
    lines: lines.map(({ lineId, hash, ord, kind }) => ({ lineId, hash, order: ord, kind })),
    acceptances: acceptances.map(({ lineId, what, reason, byId }) => ({ lineId, what, reason, by: personRef(people, byId) ?? unknownPerson })),
  }
}
