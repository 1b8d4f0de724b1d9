/** Narrowing and sorting of register rows; pure. */
import type { RegisterRow } from '../types/api'
import { REVISION_STATES, type RevisionState } from '../workflow/revision'

const wordsOf = (row: RegisterRow) => [
  row.number, row.title, row.revision, row.jobNumber, row.projectTitle,
  row.preparedBy?.name, row.checkedBy?.name, row.approvedBy?.name, row.checker?.name, row.awaiting?.name,
].filter(Boolean).join(' ').toLowerCase()

export interface RowFilter { search: string, state: RevisionState | '', person?: string }

/** Rows that hold every word of the search, in the state, awaiting the person (by id). */
export function filterRows(rows: readonly RegisterRow[], { search, state, person = '' }: RowFilter): RegisterRow[] {
  const wanted = search.toLowerCase().split(/\s+/).filter(Boolean)
  return rows.filter(row => (!state || row.state === state)
    && (!person || row.awaiting?.id === person)
    && wanted.every(word => wordsOf(row).includes(word)))
}

/** 2 before 10, capitals like small letters; the same order on every machine. */
export function compareNaturally(a: string, b: string): number {
  const parts = (text: string) => text.toLowerCase().match(/\d+|\D+/g) ?? []
  const [left, right] = [parts(a), parts(b)]
  for (let at = 0; at < Math.min(left.length, right.length); at++) {
    const [x, y] = [left[at]!, right[at]!]
    const byNumber = /^\d/.test(x) && /^\d/.test(y) ? Number(x) - Number(y) : 0
    if (byNumber !== 0) return byNumber
    if (x !== y) return x < y ? -1 : 1
  }
  return left.length - right.length
}

type Compare = (a: RegisterRow, b: RegisterRow) => number
const byText = (read: (row: RegisterRow) => string | null | undefined): Compare => (a, b) => {
  const [x, y] = [read(a) ?? '', read(b) ?? '']
  if (x === '' || y === '') return x === y ? 0 : x === '' ? 1 : -1
  return compareNaturally(x, y)
}
const COMPARE: Record<string, Compare> = {
  number: byText(row => row.number),
  title: byText(row => row.title),
  project: byText(row => row.jobNumber),
  revision: byText(row => row.revision),
  state: (a, b) => REVISION_STATES.indexOf(a.state) - REVISION_STATES.indexOf(b.state),
  prepared: byText(row => row.preparedBy?.name),
  checked: byText(row => row.checkedBy?.name),
  approved: byText(row => row.approvedBy?.name),
  awaiting: byText(row => row.awaiting?.name),
  age: (a, b) => a.age - b.age || (a.since < b.since ? 1 : -1),
  due: byText(row => row.due?.slice(0, 10)),
  issued: byText(row => row.issuedAt),
}

/** Sorted by a column; equal rows by job and sheet number. An unknown column leaves the order. */
export function sortRows(rows: readonly RegisterRow[], by: string, descending: boolean): RegisterRow[] {
  const compare = COMPARE[by]
  if (!compare) return [...rows]
  const second: Compare = (a, b) => COMPARE.project!(a, b) || COMPARE.number!(a, b)
  return [...rows].sort((a, b) => (descending ? -compare(a, b) : compare(a, b)) || second(a, b))
}
