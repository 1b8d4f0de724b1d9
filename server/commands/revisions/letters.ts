/** The letters of a transition, queued in its transaction. */
import type { Transaction } from 'sequelize'
import { findPerson } from '../../database/queries/people'
import type { RevisionRecord } from '../../database/queries/revisionRecord'
import { queueLetter } from '../../jobs/queue'
import type { Letter } from '../../mail'

type SheetLetter = Extract<Letter, { sheet: unknown }>
type WithoutCommon<T> = T extends SheetLetter ? Omit<T, 'to' | 'sheet' | 'link'> : never
export type LetterBody = WithoutCommon<SheetLetter>

export interface Addressee { id: string, name: string, email: string }

type Named = Pick<RevisionRecord, 'project' | 'sheet' | 'revision' | 'submission'>

/** How a letter names the sheet: by what its frozen title block says, if it is frozen. */
export function sheetNames({ project, sheet, revision, submission }: Named) {
  const { number, title } = submission?.titleBlock ?? sheet
  return { job: project.jobNumber, number, title, revision: revision.label }
}

/** `cause` names the event, so that the same event queues the same letter once. */
export async function writeTo(person: Addressee, record: Named, body: LetterBody, cause: string, transaction: Transaction, area: 'sheets' | 'issued' = 'sheets'): Promise<void> {
  const letter = { ...body, to: { name: person.name, address: person.email }, sheet: sheetNames(record), link: `/${area}/${record.revision.id}` } as SheetLetter
  await queueLetter(letter, `${body.kind}:${cause}:${person.id}`, transaction)
}

/** Like `writeTo`, to people by id; who can no longer sign in is left out. */
export async function writeToPeople(ids: readonly (string | null)[], record: Named, body: LetterBody, cause: string, transaction: Transaction): Promise<void> {
  for (const id of new Set(ids)) {
    const person = id ? await findPerson(id, transaction) : null
    if (person && !person.disabled) await writeTo(person, record, body, cause, transaction)
  }
}
