import type { Actor } from '#shared/policies/actor'
import type { Sign } from '#shared/schemas/revisions'
import { checkedStatement } from '#shared/workflow/statements'
import { writeSignature } from '../../signing/signatures'
import { badInput } from '../../utils/errors'
import { endCheck } from '../checks/asking'
import { auditSubject, moveRevision, onRevision, requireSubmission, requireVersion } from './transition'

/** Signs *checked*: every line ticked, every annotation that must change closed. The caller has asked for the password again. */
export function signRevision(actor: Actor, revisionId: string, input: Omit<Sign, 'password'>): Promise<void> {
  return onRevision(actor, revisionId, 'sign', async (record, transaction, effects) => {
    requireVersion(record, input.version)
    const submission = requireSubmission(record, input.submissionHash)
    const { revision, sheet } = record
    if (sheet.checkLevel === 3 && input.method !== 'alternative_calculation') {
      throw badInput('method', 'Check level 3 asks for a full alternative calculation.', 'level_three')
    }
    const statement = checkedStatement({ number: submission.titleBlock.number, revision: revision.label }, input.method, input.extent)
    const signature = await writeSignature({
      actor, revisionId, sheetId: sheet.id, submission, meaning: 'checked', statement, method: input.method, extent: input.extent,
    }, transaction)
    await endCheck(submission.id, 'signed', transaction)
    await moveRevision(revision, 'sign', transaction, effects)
    effects.audit.push({
      event: 'revision_signed', actorId: actor.id, subject: auditSubject(record),
      data: { submission: submission.id, signature: signature.id, hash: submission.contentHash, method: input.method },
    })
  })
}
