/** The end of an issue, by the job that makes the stamped file. There is no person who asks; the approval asked. */
import type { Transaction } from 'sequelize'
import { Issue, Revision } from '../../database'
import { lockRevisions, lockRevisionRecord, type RevisionRecord } from '../../database/queries/revisionRecord'
import { runCommand, type Effects } from '../run'

export interface IssueWork { issue: Issue, record: RevisionRecord, revisions: Revision[] }

/** Locks all revisions of the issue's sheet, then the issue. Throws when there is no such issue. */
export async function onIssue<T>(issueId: string, work: (found: IssueWork, transaction: Transaction, effects: Effects) => Promise<T>): Promise<T> {
  const { revisionId } = await Issue.findByPk(issueId, { rejectOnEmpty: true })
  const { sheetId } = await Revision.findByPk(revisionId, { rejectOnEmpty: true })
  const ids = (await Revision.findAll({ attributes: ['id'], where: { sheetId } })).map(one => one.id)
  return runCommand(async (transaction, effects) => {
    const revisions = await lockRevisions(ids, transaction)
    const record = await lockRevisionRecord(revisionId, transaction)
    const issue = await Issue.findByPk(issueId, { transaction, lock: transaction.LOCK.UPDATE, rejectOnEmpty: true })
    if (!record) throw new Error('The revision of the issue is missing.')
    return work({ issue, record, revisions }, transaction, effects)
  })
}
