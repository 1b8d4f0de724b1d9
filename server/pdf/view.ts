/** Everything that stands on an issued sheet, gathered when its PDF is made; all of it was fixed by the approval. */
import { Op } from 'sequelize'
import type { SheetContent } from '#shared/document/canonical'
import type { SheetDocument } from '#shared/document/types'
import type { SheetResult } from '#shared/engine/types'
import type { PersonRef } from '#shared/types/api'
import type { PrintedRevision, PrintView, TitleBlockView } from '#shared/types/print'
import { sheetFigures } from '../calc'
import { Acceptance, Issue, Organisation, Revision, Signature, Submission, SubmissionLine } from '../database'
import { firmName } from '../database/issues'
import { peopleById, type KnownPerson } from '../database/queries/people'
import { findRevisionRecord, type RevisionRecord } from '../database/queries/revisionRecord'
import { outsideSettings } from '../utils/outside'
import { qrDrawing } from './qr'

type People = Map<string, KnownPerson>

/** The whole record of an issue that is being made. */
export interface IssueSources {
  issue: Issue
  record: RevisionRecord
  submission: Submission
  signatures: Signature[]
}

/** Throws when something that an approval leaves behind is missing. */
export async function issueSources(issueId: string): Promise<IssueSources> {
  const issue = await Issue.findByPk(issueId, { rejectOnEmpty: true })
  const submission = await Submission.findByPk(issue.submissionId, { rejectOnEmpty: true })
  const signatures = await Signature.findAll({ where: { submissionId: submission.id, voidedAt: null }, order: [['signedAt', 'ASC'], ['id', 'ASC']] })
  const record = await findRevisionRecord(issue.revisionId)
  if (!record) throw new Error('The revision of this issue is missing.')
  if (!signatures.some(one => one.meaning === 'approved')) throw new Error('The approval of this issue does not stand.')
  return { issue, record, submission, signatures }
}

const refOf = (id: string, people: People): PersonRef | null => {
  const person = people.get(id)
  return person ? { id: person.id, name: person.name, initials: person.initials } : null
}

/** The name as it was signed, whatever the person is called today. */
function signedBy(meaning: Signature['meaning'], { signatures }: IssueSources, people: People) {
  const signature = signatures.findLast(one => one.meaning === meaning)
  if (!signature) return { by: null, at: null }
  const ref = refOf(signature.userId, people) ?? { id: signature.userId, name: '', initials: '' }
  return { by: { ...ref, name: signature.signerName }, at: signature.signedAt.toISOString() }
}

async function titleBlock(sources: IssueSources, people: People): Promise<TitleBlockView> {
  const { issue, record: { revision, sheet, project }, submission } = sources
  const client = project.clientId ? await Organisation.findByPk(project.clientId) : null
  const [prepared, checked, approved] = (['prepared', 'checked', 'approved'] as const).map(meaning => signedBy(meaning, sources, people))
  return {
    number: submission.titleBlock.number, title: submission.titleBlock.title, revision: revision.label, state: 'issued',
    jobNumber: project.jobNumber, projectTitle: project.title, clientName: client?.name ?? null,
    checkLevel: sheet.checkLevel, purpose: issue.purpose, reasonForRevision: revision.reason,
    preparedBy: prepared?.by ?? null, preparedAt: prepared?.at ?? null, checker: checked?.by ?? null,
    checkedBy: checked?.by ?? null, checkedAt: checked?.at ?? null, approvedBy: approved?.by ?? null, approvedAt: approved?.at ?? null,
    issuedAt: approved?.at ?? null, due: null,
  }
}

async function issuedBefore({ record: { revision } }: IssueSources): Promise<{ revision: Revision, issue: Issue }[]> {
  const revisions = await Revision.findAll({ where: { sheetId: revision.sheetId, ordinal: { [Op.lt]: revision.ordinal } }, order: [['ordinal', 'ASC']] })
  const issues = await Issue.findAll({ where: { revisionId: revisions.map(one => one.id), issuedAt: { [Op.not]: null } } })
  return revisions.flatMap((one) => {
    const issue = issues.find(candidate => candidate.revisionId === one.id)
    return issue ? [{ revision: one, issue }] : []
  })
}

async function printedRevision(revision: Revision, issue: Issue, date: Date): Promise<PrintedRevision> {
  const signatures = await Signature.findAll({ where: { submissionId: issue.submissionId, voidedAt: null }, order: [['signedAt', 'ASC']] })
  const name = (meaning: Signature['meaning']) => signatures.findLast(one => one.meaning === meaning)?.signerName ?? ''
  return { revision: revision.label, date: date.toISOString(), purpose: issue.purpose, reason: revision.reason, prepared: name('prepared'), checked: name('checked'), approved: name('approved') }
}

/** Rows that were not on the revision issued before, or were other there. */
async function changedRows(submissionId: string, earlier: Issue | undefined): Promise<string[]> {
  if (!earlier) return []
  const [now, before] = await Promise.all([submissionId, earlier.submissionId].map(id => SubmissionLine.findAll({ where: { submissionId: id } })))
  const known = new Map(before?.map(line => [line.lineId, line.hash]))
  return now?.filter(line => known.get(line.lineId) !== line.hash).map(line => line.lineId) ?? []
}

async function acceptancesOf(submissionId: string): Promise<PrintView['acceptances']> {
  const rows = await Acceptance.findAll({ where: { submissionId }, order: [['id', 'ASC']] })
  const people = await peopleById(rows.map(row => row.byId))
  return rows.map(row => ({ lineId: row.lineId, what: row.what, reason: row.reason, by: refOf(row.byId, people) ?? { id: row.byId, name: '', initials: '' } }))
}

/** The content as it was frozen. */
export function frozenContent({ submission }: IssueSources): { document: SheetDocument, results: SheetResult, content: SheetContent } {
  const content = JSON.parse(submission.contentJson) as SheetContent
  return { content, document: content.document, results: JSON.parse(submission.shownJson) as SheetResult }
}

/** What the print page is given. */
export async function printView(sources: IssueSources): Promise<PrintView> {
  const { issue, record, submission, signatures } = sources
  const { content, document, results } = frozenContent(sources)
  const people = await peopleById(signatures.map(one => one.userId))
  const title = await titleBlock(sources, people)
  const approvedAt = title.approvedAt ?? issue.createdAt.toISOString()
  const earlier = await issuedBefore(sources)
  const history = await Promise.all(earlier.map(one => printedRevision(one.revision, one.issue, one.issue.issuedAt ?? one.issue.createdAt)))
  const verifyUrl = `${outsideSettings().siteUrl}/verify/${issue.code}`
  return {
    revision: title,
    paper: submission.titleBlock.settings.paper,
    firm: await firmName(),
    purpose: issue.purpose,
    approvedAt,
    code: issue.code,
    verifyUrl,
    qr: qrDrawing(verifyUrl),
    relianceNotice: record.project.relianceNotice,
    contentHash: submission.contentHash,
    resultsHash: submission.resultsHash,
    engine: { version: submission.engineVersion, hash: submission.engineHash },
    document,
    results,
    ...await sheetFigures(document, content.settings),
    cautions: JSON.parse(submission.cautionsJson) as PrintView['cautions'],
    acceptances: await acceptancesOf(submission.id),
    signatures: signatures.map(one => ({ meaning: one.meaning, name: one.signerName, at: one.signedAt.toISOString(), statement: one.statement, hash: one.hash })),
    history: [...history, await printedRevision(record.revision, issue, new Date(approvedAt))],
    changed: await changedRows(submission.id, earlier.at(-1)?.issue),
  }
}
