import { QueryTypes } from 'sequelize'
import type { PersonRef } from '#shared/types/api'
import { sequelize } from '..'

/** Who has written in a draft lately, the last writer first. `afterSeq`: only what came after that update. */
export function recentEditors(revisionId: string, within: { minutes: number, afterSeq?: number }): Promise<PersonRef[]> {
  return sequelize.query<PersonRef>(
    `SELECT u.id, u.name, u.initials FROM revision_updates r JOIN users u ON u.id = r.user_id
     WHERE r.revision_id = :revision AND r.seq > :after AND r.created_at >= DATE_SUB(UTC_TIMESTAMP(3), INTERVAL :minutes MINUTE)
     GROUP BY u.id, u.name, u.initials ORDER BY MAX(r.seq) DESC`,
    { replacements: { revision: revisionId, minutes: within.minutes, after: within.afterSeq ?? 0 }, type: QueryTypes.SELECT },
  )
}
