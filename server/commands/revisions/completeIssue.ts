import type { Transaction } from 'sequelize'
import { PURPOSE_LABELS } from '#shared/workflow/statements'
import { Transmittal } from '../../database'
import { findPerson, peopleOfClient } from '../../database/queries/people'
import { newId } from '../../utils/ids'
import type { Effects } from '../run'
import { onIssue, type IssueWork } from './issuing'
import { writeTo } from './letters'
import { auditSubject, moveRevision } from './transition'
import { now } from '../../utils/clock'

export interface StampedFile { key: string, sha256: string, size: number }

async function supersedeEarlier({ record, revisions }: IssueWork, transaction: Transaction, effects: Effects): Promise<string | null> {
  const earlier = revisions.filter(one => one.id !== record.revision.id && one.state === 'issued')
  for (const revision of earlier) {
    await moveRevision(revision, 'supersede', transaction, effects)
    effects.audit.push({ event: 'revision_superseded', actorId: null, subject: { ...auditSubject(record), revision: revision.id }, data: { by: record.revision.id } })
  }
  return earlier.at(-1)?.label ?? null
}

async function tellClient({ issue, record }: IssueWork, supersedes: string | null, transaction: Transaction): Promise<string[]> {
  const people = record.project.clientId ? await peopleOfClient(record.project.clientId, transaction) : []
  const approver = await findPerson(issue.requestedBy, transaction)
  for (const person of people) {
    await Transmittal.create({ id: newId(), issueId: issue.id, userId: person.id, email: person.email }, { transaction })
    await writeTo(person, record, {
      kind: 'issued', by: approver?.name ?? '', purpose: PURPOSE_LABELS[issue.purpose].toLowerCase(), code: issue.code, supersedes,
    }, issue.id, transaction, 'issued')
  }
  return people.map(person => person.id)
}

/**
 * The stamped file is stored: the revision is issued, the earlier one superseded, the client's people told.
 * Safe to call again for the same issue. False: the issue had been given up, so nothing was done.
 */
export function completeIssue(issueId: string, file: StampedFile): Promise<boolean> {
  return onIssue(issueId, async (found, transaction, effects) => {
    const { issue, record } = found
    if (issue.issuedAt) return true
    if (issue.failedAt) return false
    await issue.update({ pdfStorageKey: file.key, pdfHash: file.sha256, pdfSize: file.size, issuedAt: now() }, { transaction })
    await moveRevision(record.revision, 'pdf_stored', transaction, effects)
    const supersedes = await supersedeEarlier(found, transaction, effects)
    const recipients = await tellClient(found, supersedes, transaction)
    effects.audit.push({ event: 'revision_issued', actorId: issue.requestedBy, subject: auditSubject(record), data: { issue: issue.id, pdfHash: file.sha256, recipients } })
    return true
  })
}
