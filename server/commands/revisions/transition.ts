/** What every command on a revision shares: the lock, the right, the version, the step of the state machine. */
import type { Transaction } from 'sequelize'
import type { Actor } from '#shared/policies/actor'
import { mayDo, see } from '#shared/policies/revisions'
import type { RevisionAbility } from '#shared/types/api'
import { STATE_LABELS, transition, type RevisionEvent } from '#shared/workflow/revision'
import { RevisionDoc, type Revision } from '../../database'
import { lockRevisionRecord, type RevisionRecord, type SubmissionHead } from '../../database/queries/revisionRecord'
import { authorise, authoriseSight } from '../../utils/authorise'
import { conflict, notFound } from '../../utils/errors'
import { runCommand, type Effects } from '../run'
import { now } from '../../utils/clock'

export type RevisionWork<T> = (record: RevisionRecord, transaction: Transaction, effects: Effects) => Promise<T>

/** Runs `work` on the locked revision if the actor may see it and do `what` with it as it is now. */
export function onRevision<T>(actor: Actor, revisionId: string, what: RevisionAbility, work: RevisionWork<T>): Promise<T> {
  return runCommand(async (transaction, effects) => {
    const record = await lockRevisionRecord(revisionId, transaction)
    if (!record) throw notFound()
    authoriseSight(see(actor, record.facts))
    authorise(mayDo(what, actor, record.facts))
    return work(record, transaction, effects)
  })
}

/** Refuses a writer who saw another version of the revision. */
export function requireVersion({ revision }: RevisionRecord, version: number): void {
  if (revision.version === version) return
  throw conflict('changed_meanwhile', `Someone else was first: it is ${STATE_LABELS[revision.state].toLowerCase()} now. Load it again.`, { state: revision.state, version: revision.version })
}

/** The submission, if it is the one that was on the screen. */
export function requireSubmission(record: RevisionRecord, shownHash: string): SubmissionHead {
  const { submission } = record
  if (!submission) throw conflict('wrong_state', 'There is no submission of it at present.')
  if (submission.contentHash !== shownHash) {
    throw conflict('other_content', 'What you had on the screen is not what is submitted now. Load it again and look at what changed.', { submissionHash: submission.contentHash })
  }
  return submission
}

type Changes = Partial<Pick<Revision, 'checkerId' | 'dueDate' | 'purpose' | 'returnedReason' | 'returnedBy'>>

/** One step of the state machine, on the revision and on the row of its document. The caller holds the revision's lock. */
export async function moveRevision(revision: Revision, event: RevisionEvent, transaction: Transaction, effects: Effects, changes: Changes = {}): Promise<void> {
  const outcome = transition(revision.state, event)
  if (!outcome.ok) throw conflict('wrong_state', `It is ${STATE_LABELS[revision.state].toLowerCase()}, so this cannot be done.`, { state: revision.state })
  const moment = now()
  await revision.update({ ...changes, state: outcome.state, since: moment, updatedAt: moment, version: revision.version + 1 }, { transaction })
  await RevisionDoc.update({ state: outcome.state }, { where: { revisionId: revision.id }, transaction })
  effects.stateChanged(revision.id)
}

export const auditSubject = ({ project, sheet, revision }: Pick<RevisionRecord, 'project' | 'sheet' | 'revision'>) =>
  ({ project: project.id, sheet: sheet.id, revision: revision.id })
