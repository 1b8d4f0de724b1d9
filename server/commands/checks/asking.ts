/** Who is asked to check a submission, and what became of it. */
import type { Transaction } from 'sequelize'
import { whyNotChecker } from '#shared/policies/checkers'
import { Check, type CheckOutcome } from '../../database'
import { findPerson, type KnownPerson } from '../../database/queries/people'
import type { RevisionRecord } from '../../database/queries/revisionRecord'
import { badInput } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { now } from '../../utils/clock'

/** The person, if they can check this revision. */
export async function requireChecker(record: RevisionRecord, checkerId: string, submitterId: string, transaction: Transaction): Promise<KnownPerson> {
  const person = await findPerson(checkerId, transaction)
  const why = person ? whyNotChecker(person, record.facts, submitterId) : 'There is no such person.'
  if (!person || why) throw badInput('checkerId', why ?? '', 'not_independent')
  return person
}

export async function askChecker(asked: { submissionId: string, checkerId: string, askedBy: string, dueDate: string | null }, transaction: Transaction): Promise<void> {
  await Check.create({ id: newId(), ...asked }, { transaction })
}

export async function endCheck(submissionId: string, outcome: CheckOutcome, transaction: Transaction): Promise<void> {
  await Check.update({ endedAt: now(), outcome }, { where: { submissionId, endedAt: null }, transaction })
}
