/** One command, one transaction; what follows from it outside the database happens after its COMMIT. */
import type { Transaction } from 'sequelize'
import { keepAuditHead } from '../audit/head'
import { recordAudit } from '../audit/chain'
import type { AuditEvent } from '../audit/events'
import { withTransaction } from '../database'
import { wakeJobs } from '../jobs/queue'
import { errorFields, log } from '../utils/log'
import { revisionEvents, type RevisionEvent } from '../utils/revisionEvents'
import { revocations, type Revocation } from '../utils/revocation'

/** What a command leaves to be done: its audit entries are the last thing in the transaction, the rest comes after COMMIT. */
export class Effects {
  readonly audit: AuditEvent[] = []
  readonly events: RevisionEvent[] = []
  readonly revoked: Revocation[] = []

  /** The revision stopped or started being a draft: its document is closed to writers of the epoch before. */
  stateChanged(revisionId: string): void {
    this.events.push({ revisionId, what: 'state' })
    this.revoked.push({ kind: 'revision', id: revisionId })
  }

  changed(revisionId: string, what: RevisionEvent['what']): void {
    this.events.push({ revisionId, what })
  }
}

/** `work` may run more than once (deadlocks), so it has no effect but on the database and on its `effects`. */
export async function runCommand<T>(work: (transaction: Transaction, effects: Effects) => Promise<T>): Promise<T> {
  const { result, effects, head } = await withTransaction(async (transaction) => {
    const fresh = new Effects()
    const value = await work(transaction, fresh)
    const newHead = fresh.audit.length > 0 ? await recordAudit(transaction, ...fresh.audit) : null
    return { result: value, effects: fresh, head: newHead }
  })
  wakeJobs()
  for (const revoked of effects.revoked) revocations.emit(revoked)
  for (const event of effects.events) revisionEvents.emit(event)
  if (head) {
    // The transition stands; a head that could not be kept is kept with the next one.
    await keepAuditHead(head).catch((error: unknown) => log('error', 'audit_head_not_kept', errorFields(error)))
  }
  return result
}
