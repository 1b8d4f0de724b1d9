/** Rows of registers, boards and work lists: filtered, searched and sorted in the database. */
import { QueryTypes } from 'sequelize'
import type { IssuePurpose } from '#shared/types/api'
import type { RegisterSort } from '#shared/schemas/sheets'
import type { RevisionState } from '#shared/workflow/revision'
import { sequelize } from '..'

export interface RegisterRecord {
  sheet_id: string, revision_id: string, project_id: string, job_number: string, project_title: string
  number: string, title: string, label: string, state: RevisionState
  author_id: string, prepared_id: string | null, checked_id: string | null, approved_id: string | null, checker_id: string | null
  since: Date, due_date: string | null, returned_reason: string | null
  ticked: number | null, line_count: number | null, must_change: number
  issued_at: Date | null, purpose: IssuePurpose | null, code: string | null
}

/** Whose rows: a project's sheets, everything open, what one person writes or checks, what was issued to a client. */
export type RegisterScope =
  | { kind: 'project', projectId: string }
  | { kind: 'open' }
  | { kind: 'writer', userId: string }
  | { kind: 'checker', userId: string }
  | { kind: 'client', organisationId: string }

export interface RegisterSearch { states?: readonly RevisionState[], text?: string, sort?: RegisterSort }

const ROWS = `SELECT s.id AS sheet_id, r.id AS revision_id, p.id AS project_id, p.job_number, p.title AS project_title,
    COALESCE(JSON_VALUE(sub.title_block, '$.number'), s.number) AS number, COALESCE(JSON_VALUE(sub.title_block, '$.title'), s.title) AS title,
    r.label, r.state, r.author_id, sp.user_id AS prepared_id, sc.user_id AS checked_id, sa.user_id AS approved_id, r.checker_id,
    r.since, r.due_date, r.returned_reason,
    IF(sub.id IS NULL, NULL, (SELECT COUNT(*) FROM submission_lines l WHERE l.submission_id = sub.id)) AS line_count,
    IF(sub.id IS NULL, NULL, (SELECT COUNT(*) FROM ticks t WHERE t.submission_id = sub.id AND t.checker_id = r.checker_id)) AS ticked,
    (SELECT COUNT(*) FROM annotations a WHERE a.revision_id = r.id AND a.kind = 'must_change' AND a.state <> 'closed') AS must_change,
    i.issued_at, r.purpose, i.code
  FROM revisions r
  JOIN sheets s ON s.id = r.sheet_id
  JOIN projects p ON p.id = s.project_id
  LEFT JOIN submissions sub ON sub.revision_id = r.id AND r.state NOT IN ('draft', 'cancelled')
    AND sub.ordinal = (SELECT MAX(x.ordinal) FROM submissions x WHERE x.revision_id = r.id)
  LEFT JOIN signatures sp ON sp.submission_id = sub.id AND sp.meaning = 'prepared' AND sp.voided_at IS NULL
  LEFT JOIN signatures sc ON sc.submission_id = sub.id AND sc.meaning = 'checked' AND sc.voided_at IS NULL
  LEFT JOIN signatures sa ON sa.submission_id = sub.id AND sa.meaning = 'approved' AND sa.voided_at IS NULL
  LEFT JOIN issues i ON i.revision_id = r.id AND i.issued_at IS NOT NULL`

/** A sheet stands in the register with its open revision, else the last one that was not cancelled, else the last. */
const CURRENT = `r.id = (SELECT c.id FROM revisions c WHERE c.sheet_id = s.id
  ORDER BY c.open_marker IS NULL, c.state = 'cancelled', c.ordinal DESC LIMIT 1)`

function scopeCondition(scope: RegisterScope): string {
  switch (scope.kind) {
    case 'project': return `p.id = :projectId AND ${CURRENT}`
    case 'open': return 'r.open_marker = 1 AND p.archived_at IS NULL'
    case 'checker': return 'r.state = \'for_checking\' AND r.checker_id = :userId'
    case 'client': return 'p.client_id = :organisationId AND r.state IN (\'issued\', \'superseded\', \'withdrawn\')'
    case 'writer': return `r.open_marker = 1 AND p.archived_at IS NULL
      AND EXISTS (SELECT 1 FROM project_members m WHERE m.project_id = p.id AND m.user_id = :userId)
      AND (r.author_id = :userId OR sub.submitted_by = :userId
        OR EXISTS (SELECT 1 FROM contributors c WHERE c.revision_id = r.id AND c.user_id = :userId AND NOT c.inherited))`
  }
}

const TEXT_MATCH = `(s.number LIKE :text OR s.title LIKE :text OR JSON_VALUE(sub.title_block, '$.title') LIKE :text OR p.job_number LIKE :text OR p.title LIKE :text
  OR EXISTS (SELECT 1 FROM users u WHERE u.name LIKE :text AND u.id IN (r.author_id, r.checker_id, sp.user_id, sc.user_id, sa.user_id)))`

const COLUMNS: Record<string, string> = {
  number: 'number', title: 'title', revision: 'r.ordinal', since: 'r.since', state: 'r.state + 0', due: 'r.due_date IS NULL, r.due_date',
}

function order(sort: RegisterSort = 'number'): string {
  const descending = sort.startsWith('-')
  const column = COLUMNS[descending ? sort.slice(1) : sort] ?? 'number'
  const direction = descending ? 'DESC' : 'ASC'
  return `${column} ${direction}, p.job_number ASC, s.number ASC, r.ordinal DESC`
}

/** `%` and `_` are characters like any other to whoever types them. */
const likePattern = (text: string): string => `%${text.replace(/[\\%_]/g, character => `\\${character}`)}%`

export function findRegisterRecords(scope: RegisterScope, search: RegisterSearch = {}): Promise<RegisterRecord[]> {
  const states = search.states ?? []
  const conditions = [scopeCondition(scope), ...(states.length > 0 ? ['r.state IN (:states)'] : []), ...(search.text ? [TEXT_MATCH] : [])]
  return sequelize.query<RegisterRecord>(`${ROWS} WHERE ${conditions.join(' AND ')} ORDER BY ${order(search.sort)} LIMIT 2000`, {
    replacements: { ...scope, states, text: search.text ? likePattern(search.text) : '' },
    type: QueryTypes.SELECT,
  })
}

/** Managers authorised for projects, by project, in order of name. */
export async function managersOfProjects(projectIds: readonly string[]): Promise<Map<string, string[]>> {
  if (projectIds.length === 0) return new Map()
  const rows = await sequelize.query<{ project_id: string, user_id: string }>(
    `SELECT m.project_id, m.user_id FROM project_members m JOIN users u ON u.id = m.user_id
     WHERE m.role = 'manager' AND u.disabled_at IS NULL AND m.project_id IN (:projectIds) ORDER BY u.name, u.id`,
    { replacements: { projectIds }, type: QueryTypes.SELECT },
  )
  const byProject = new Map<string, string[]>()
  for (const row of rows) byProject.set(row.project_id, [...byProject.get(row.project_id) ?? [], row.user_id])
  return byProject
}
