/** A new draft: its row, its document made once on the server, and the contributors that its content brings along. */
import { QueryTypes, type Transaction } from 'sequelize'
import { createInitialUpdate } from '#shared/document/yjs'
import type { SheetDocument } from '#shared/document/types'
import type { SheetContent } from '#shared/document/canonical'
import { validateDocument } from '#shared/document/validate'
import { Revision, RevisionDoc, RevisionSnapshot, sequelize, Submission } from '../../database'
import { newId } from '../../utils/ids'

export interface NewRevision {
  sheetId: string
  label: string
  ordinal: number
  authorId: string
  document: SheetDocument
  basedOnId: string | null
  reason: string | null
}

/** Contributors of the content a revision is started from, those it had inherited itself among them. */
async function inheritContributors(fromId: string, revisionId: string, transaction: Transaction): Promise<void> {
  await sequelize.query(
    `INSERT INTO contributors (revision_id, user_id, inherited, first_at)
     SELECT :revision, user_id, TRUE, UTC_TIMESTAMP(3) FROM contributors WHERE revision_id = :from`,
    { replacements: { revision: revisionId, from: fromId }, type: QueryTypes.INSERT, transaction },
  )
}

/** The beginning of the document is a snapshot before the first update, so that nobody counts as its writer. */
export async function startRevision(start: NewRevision, transaction: Transaction): Promise<string> {
  const { document, ...row } = start
  const revision = await Revision.create({ id: newId(), state: 'draft', ...row }, { transaction })
  await RevisionDoc.create({ revisionId: revision.id, state: 'draft' }, { transaction })
  await RevisionSnapshot.create({ revisionId: revision.id, seq: 0, bytes: Buffer.from(createInitialUpdate(document)) }, { transaction })
  if (start.basedOnId) await inheritContributors(start.basedOnId, revision.id, transaction)
  return revision.id
}

/** The document of a revision's newest submission, with its ids; null when it was never submitted. */
export async function frozenDocument(revisionId: string, transaction: Transaction): Promise<SheetDocument | null> {
  const submission = await Submission.findOne({ attributes: ['contentJson'], where: { revisionId }, order: [['ordinal', 'DESC']], transaction })
  if (!submission) return null
  const content = JSON.parse(submission.contentJson) as SheetContent
  const outcome = validateDocument(content.document)
  if (!outcome.ok) throw new Error('A frozen document does not fit the schema of this version.')
  return outcome.document
}
