import type { PersonRef, RegisterRow } from '#shared/types/api'
import { workingDaysSince } from '#shared/utils/workingDays'
import { peopleById, type KnownPerson } from '../database/queries/people'
import { managersOfProjects, type RegisterRecord } from '../database/queries/register'

type People = ReadonlyMap<string, KnownPerson>

export const personRef = (people: People, id: string | null): PersonRef | null => {
  const person = id ? people.get(id) : undefined
  return person ? { id: person.id, name: person.name, initials: person.initials } : null
}

/** Whose move it is: the author's of a draft, the checker's, or a manager's who is not its checker. */
function awaitedId(record: RegisterRecord, managers: readonly string[]): string | null {
  if (record.state === 'draft') return record.author_id
  if (record.state === 'for_checking') return record.checker_id
  if (record.state !== 'checked') return null
  return managers.find(id => id !== record.checked_id && id !== record.prepared_id) ?? null
}

function presentRow(record: RegisterRecord, people: People, managers: readonly string[], now: Date): RegisterRow {
  const ref = (id: string | null) => personRef(people, id)
  return {
    sheetId: record.sheet_id, revisionId: record.revision_id,
    projectId: record.project_id, jobNumber: record.job_number, projectTitle: record.project_title,
    number: record.number, title: record.title, revision: record.label, state: record.state,
    preparedBy: ref(record.prepared_id ?? record.author_id), checkedBy: ref(record.checked_id), approvedBy: ref(record.approved_id),
    checker: ref(record.checker_id), awaiting: ref(awaitedId(record, managers)),
    since: record.since.toISOString(), due: record.state === 'for_checking' ? record.due_date : null,
    age: workingDaysSince(record.since, now),
    ticked: record.ticked, lines: record.line_count, openMustChange: record.must_change,
    returnReason: record.state === 'draft' ? record.returned_reason : null,
    issuedAt: record.issued_at?.toISOString() ?? null, purpose: record.purpose, code: record.code,
  }
}

export async function presentRegister(records: readonly RegisterRecord[], now = new Date()): Promise<RegisterRow[]> {
  const managers = await managersOfProjects([...new Set(records.map(record => record.project_id))])
  const ids = records.flatMap(record => [record.author_id, record.prepared_id, record.checked_id, record.approved_id, record.checker_id])
  const people = await peopleById([...ids, ...[...managers.values()].flat()])
  return records.map(record => presentRow(record, people, managers.get(record.project_id) ?? [], now))
}

/** A client sees who signed, but not who is asked, what was returned or how far a check got. */
export const withoutInternals = (row: RegisterRow): RegisterRow => ({
  ...row, checker: null, awaiting: null, ticked: null, lines: null, openMustChange: 0, returnReason: null, due: null,
})
