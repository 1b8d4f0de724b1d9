/** A revision with all that decides about it. Within a transaction whose first statement locked it, what is read is what will be when it commits. */
import { QueryTypes, type Transaction } from 'sequelize'
import type { RevisionFacts } from '#shared/policies/revisions'
import type { ProjectFacts } from '#shared/policies/projects'
import { Contributor, Project, ProjectMember, Revision, RevisionDoc, sequelize, Sheet, Signature, Submission } from '..'

/** A submission without its long texts. */
export type SubmissionHead = Pick<Submission, 'id' | 'ordinal' | 'contentHash' | 'resultsHash' | 'titleBlock' | 'submittedBy' | 'engineHash' | 'createdAt'>
const HEAD_COLUMNS = ['id', 'ordinal', 'contentHash', 'resultsHash', 'titleBlock', 'submittedBy', 'engineHash', 'createdAt']

export interface RevisionRecord {
  revision: Revision
  sheet: Sheet
  project: Project
  doc: Pick<RevisionDoc, 'epoch' | 'nextSeq'>
  contributors: Contributor[]
  /** The present submission; null for a draft. */
  submission: SubmissionHead | null
  facts: RevisionFacts
}

export async function projectFacts(project: Project, transaction?: Transaction): Promise<ProjectFacts> {
  const members = await ProjectMember.findAll({ where: { projectId: project.id }, transaction })
  const ids = (role: ProjectMember['role']) => members.filter(member => member.role === role).map(member => member.userId)
  return { memberIds: ids('member'), managerIds: ids('manager'), clientId: project.clientId, archived: project.archivedAt !== null }
}

interface Counts { line_count: number, ticked: number, must_change: number, open_elsewhere: number, later: number, sheet_issued: number, has_pdf: number }

const COUNTS = `SELECT
  (SELECT COUNT(*) FROM submission_lines l WHERE l.submission_id = :submission) AS line_count,
  (SELECT COUNT(*) FROM ticks t JOIN submission_lines l ON l.submission_id = t.submission_id AND l.line_id = t.line_id AND l.hash = t.line_hash
    WHERE t.submission_id = :submission AND t.checker_id = :checker) AS ticked,
  (SELECT COUNT(*) FROM annotations a WHERE a.revision_id = :revision AND a.kind = 'must_change' AND a.state <> 'closed') AS must_change,
  (SELECT COUNT(*) FROM revisions r WHERE r.sheet_id = :sheet AND r.id <> :revision AND r.open_marker = 1) AS open_elsewhere,
  (SELECT COUNT(*) FROM revisions r WHERE r.sheet_id = :sheet AND r.ordinal > :ordinal AND r.state <> 'cancelled') AS later,
  (SELECT COUNT(*) FROM revisions r JOIN issues i ON i.revision_id = r.id WHERE r.sheet_id = :sheet AND i.issued_at IS NOT NULL) AS sheet_issued,
  (SELECT COUNT(*) FROM issues i WHERE i.revision_id = :revision AND i.issued_at IS NOT NULL AND i.pdf_storage_key IS NOT NULL) AS has_pdf`

async function counts(revision: Revision, submissionId: string | null, transaction?: Transaction): Promise<Counts> {
  const [row] = await sequelize.query<Counts>(COUNTS, {
    replacements: { submission: submissionId, checker: revision.checkerId, revision: revision.id, sheet: revision.sheetId, ordinal: revision.ordinal },
    type: QueryTypes.SELECT,
    transaction,
  })
  if (!row) throw new Error('Counting gave no row.')
  return row
}

/** The newest submission of a revision, without its long texts. */
export function latestSubmission(revisionId: string, transaction?: Transaction): Promise<SubmissionHead | null> {
  return Submission.findOne({ attributes: HEAD_COLUMNS, where: { revisionId }, order: [['ordinal', 'DESC']], transaction })
}

async function checkedBy(submissionId: string, transaction?: Transaction): Promise<string | null> {
  const signature = await Signature.findOne({ where: { submissionId, meaning: 'checked', voidedAt: null }, transaction })
  return signature?.userId ?? null
}

async function factsOf(revision: Revision, project: Project, contributors: Contributor[], submission: SubmissionHead | null, transaction?: Transaction): Promise<RevisionFacts> {
  const count = await counts(revision, submission?.id ?? null, transaction)
  return {
    state: revision.state,
    authorId: revision.authorId,
    submitterId: submission?.submittedBy ?? null,
    checkerId: revision.checkerId,
    checkedById: submission ? await checkedBy(submission.id, transaction) : null,
    contributorIds: contributors.map(one => one.userId),
    project: await projectFacts(project, transaction),
    lines: count.line_count,
    ticked: count.ticked,
    openMustChange: count.must_change,
    openElsewhere: count.open_elsewhere > 0,
    hasLater: count.later > 0,
    sheetIssued: count.sheet_issued > 0,
    hasPdf: count.has_pdf > 0,
  }
}

async function recordOf(revision: Revision, transaction?: Transaction): Promise<RevisionRecord> {
  const sheet = await Sheet.findByPk(revision.sheetId, { transaction, rejectOnEmpty: true })
  const project = await Project.findByPk(sheet.projectId, { transaction, rejectOnEmpty: true })
  const doc = await RevisionDoc.findByPk(revision.id, { transaction, rejectOnEmpty: true })
  const contributors = await Contributor.findAll({ where: { revisionId: revision.id }, order: [['firstAt', 'ASC'], ['userId', 'ASC']], transaction })
  const submission = revision.state === 'draft' || revision.state === 'cancelled' ? null : await latestSubmission(revision.id, transaction)
  return { revision, sheet, project, doc, contributors, submission, facts: await factsOf(revision, project, contributors, submission, transaction) }
}

/** Without a lock, for reading. */
export async function findRevisionRecord(id: string): Promise<RevisionRecord | null> {
  const revision = await Revision.findByPk(id)
  return revision ? recordOf(revision) : null
}

/** Locks revisions in ascending order of id, the order that every command keeps. */
export async function lockRevisions(ids: readonly string[], transaction: Transaction): Promise<Revision[]> {
  const found: Revision[] = []
  for (const id of [...new Set(ids)].sort()) {
    const revision = await Revision.findByPk(id, { transaction, lock: transaction.LOCK.UPDATE })
    if (revision) found.push(revision)
  }
  return found
}

/** Locks the revision and reads the rest under that lock. Must be the transaction's first statement. */
export async function lockRevisionRecord(id: string, transaction: Transaction): Promise<RevisionRecord | null> {
  const [revision] = await lockRevisions([id], transaction)
  return revision ? recordOf(revision, transaction) : null
}
