/** Ticks that still hold: a line that is the same, by its hash, in an earlier submission that the same checker ticked. */
import { QueryTypes, type Transaction } from 'sequelize'
import { sequelize } from '../../database'
import type { RevisionRecord } from '../../database/queries/revisionRecord'

/**
 * Looks at the earlier submissions of this revision and of the one that it was started from.
 * `ticks` are only of lines that their checker ticked as they were, so equal hashes are enough.
 */
export async function carryTicks({ revision }: Pick<RevisionRecord, 'revision'>, submissionId: string, checkerId: string, transaction: Transaction): Promise<void> {
  await sequelize.query(
    `INSERT IGNORE INTO ticks (submission_id, line_id, checker_id, line_hash, created_at)
     SELECT l.submission_id, l.line_id, :checker, l.hash, MIN(t.created_at)
     FROM submission_lines l
     JOIN ticks t ON t.line_id = l.line_id AND t.line_hash = l.hash AND t.checker_id = :checker
     JOIN submissions s ON s.id = t.submission_id
     WHERE l.submission_id = :submission AND s.id <> :submission AND s.revision_id IN (:revisions)
     GROUP BY l.submission_id, l.line_id, l.hash`,
    {
      replacements: { checker: checkerId, submission: submissionId, revisions: [revision.id, revision.basedOnId ?? revision.id] },
      type: QueryTypes.INSERT,
      transaction,
    },
  )
}
