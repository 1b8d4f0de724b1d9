/** An issue with all that a reader of it needs: what was issued, by whom it was signed, what has become of it since. */
import { Op } from 'sequelize'
import type { RecipientView } from '#shared/types/issue'
import { Issue, Signature, Transmittal } from './models/signatures'
import { Organisation, User } from './models/people'
import { Project, Sheet } from './models/projects'
import { Revision } from './models/revisions'
import { Submission } from './models/submissions'

/** An issue whose PDF is stored. */
export type CompletedIssue = Issue & { issuedAt: Date, pdfStorageKey: string, pdfHash: string }

export interface IssueFacts {
  issue: CompletedIssue
  revision: Revision
  submission: Submission
  project: Project
  firm: string
  /** The signatures that stand, in the order in which they were given. */
  signatures: Signature[]
  supersededBy: { revision: string, issuedAt: string } | null
}

const isCompleted = (issue: Issue | null): issue is CompletedIssue => issue !== null && issue.issuedAt !== null && issue.pdfStorageKey !== null && issue.pdfHash !== null

export async function firmName(): Promise<string> {
  const firm = await Organisation.findOne({ where: { kind: 'firm' }, order: [['createdAt', 'ASC']] })
  return firm?.name ?? 'The firm'
}

async function successorOf(revision: Revision): Promise<IssueFacts['supersededBy']> {
  const later = await Revision.findAll({
    where: { sheetId: revision.sheetId, ordinal: { [Op.gt]: revision.ordinal }, state: ['issued', 'superseded', 'withdrawn'] },
    order: [['ordinal', 'ASC']],
  })
  const issues = await Issue.findAll({ where: { revisionId: later.map(one => one.id), issuedAt: { [Op.not]: null } } })
  const next = later.find(one => issues.some(issue => issue.revisionId === one.id))
  const issuedAt = issues.find(issue => issue.revisionId === next?.id)?.issuedAt
  return next && issuedAt ? { revision: next.label, issuedAt: issuedAt.toISOString() } : null
}

async function factsOf(issue: CompletedIssue): Promise<IssueFacts> {
  const [revision, submission] = await Promise.all([
    Revision.findByPk(issue.revisionId, { rejectOnEmpty: true }),
    Submission.findByPk(issue.submissionId, { rejectOnEmpty: true }),
  ])
  const sheet = await Sheet.findByPk(revision.sheetId, { rejectOnEmpty: true })
  const [project, signatures, supersededBy, firm] = await Promise.all([
    Project.findByPk(sheet.projectId, { rejectOnEmpty: true }),
    Signature.findAll({ where: { submissionId: issue.submissionId, voidedAt: null }, order: [['signedAt', 'ASC']] }),
    successorOf(revision),
    firmName(),
  ])
  return { issue, revision, submission, project, firm, signatures, supersededBy }
}

/** Null when no completed issue has this code. */
export async function issueByCode(code: string): Promise<IssueFacts | null> {
  const issue = await Issue.findOne({ where: { code, issuedAt: { [Op.not]: null } } })
  return isCompleted(issue) ? factsOf(issue) : null
}

/** The stored issue of a revision; null when it has never been issued. */
export async function issueOfRevision(revisionId: string): Promise<CompletedIssue | null> {
  const issue = await Issue.findOne({ where: { revisionId, issuedAt: { [Op.not]: null } }, order: [['createdAt', 'DESC']] })
  return isCompleted(issue) ? issue : null
}

/** To whom the issue of a revision was sent, under the name of today and the address of then. */
export async function recipientsOf(revisionId: string): Promise<RecipientView[]> {
  const issue = await issueOfRevision(revisionId)
  if (!issue) return []
  const sent = await Transmittal.findAll({ where: { issueId: issue.id }, order: [['createdAt', 'ASC'], ['email', 'ASC']] })
  const people = await User.findAll({ where: { id: sent.map(one => one.userId) }, include: [{ model: Organisation, as: 'organisation' }] })
  return sent.map((one) => {
    const person = people.find(user => user.id === one.userId)
    return { name: person?.name ?? '', email: one.email, organisation: person?.organisation?.name ?? null, at: one.createdAt.toISOString() }
  })
}
