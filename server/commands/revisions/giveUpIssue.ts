import { voidSignatures } from '../../signing/signatures'
import { onIssue } from './issuing'
import { writeToPeople } from './letters'
import { auditSubject, moveRevision } from './transition'
import { now } from '../../utils/clock'

/** The stamped file could not be made: the revision is checked again and the approval void. Safe to call again for the same issue. */
export function giveUpIssue(issueId: string, failure: string): Promise<void> {
  return onIssue(issueId, async ({ issue, record }, transaction, effects) => {
    if (issue.issuedAt || issue.failedAt) return
    const reason = failure.slice(0, 2000)
    await issue.update({ failedAt: now(), failure: reason }, { transaction })
    await moveRevision(record.revision, 'issue_given_up', transaction, effects, { purpose: null })
    await voidSignatures(issue.submissionId, `The stamped file could not be made: ${reason}`, transaction, 'approved')
    await writeToPeople([issue.requestedBy], record, { kind: 'issue_failed', by: '', reason }, issue.id, transaction)
    effects.audit.push({ event: 'issue_given_up', actorId: null, subject: auditSubject(record), data: { issue: issue.id, failure: reason } })
  })
}
