import { randomBytes } from 'node:crypto'
import type { Actor } from '#shared/policies/actor'
import type { Approve } from '#shared/schemas/revisions'
import { approvedStatement } from '#shared/workflow/statements'
import { Issue } from '../../database'
import { queueJob } from '../../jobs/queue'
import { writeSignature } from '../../signing/signatures'
import { newId } from '../../utils/ids'
import { auditSubject, moveRevision, onRevision, requireSubmission, requireVersion } from './transition'

/** No letter or digit that is taken for another when it is read from paper. */
const CODE_ALPHABET = '23456789ABCDEFGHJKLMNPQRSTUVWXYZ'
const CODE_LENGTH = 24

/** A verification code: 120 random bits in six groups of four. */
export function newCode(): string {
  const characters = [...randomBytes(CODE_LENGTH)].map(byte => CODE_ALPHABET[byte & 31]!)
  return Array.from({ length: CODE_LENGTH / 4 }, (_, group) => characters.slice(group * 4, group * 4 + 4).join('')).join('-')
}

/** Signs *approved* and leaves the stamped file to a job; only when that is stored is the revision issued. Returns the issue's id. */
export function approveRevision(actor: Actor, revisionId: string, input: Omit<Approve, 'password'>): Promise<string> {
  return onRevision(actor, revisionId, 'approve', async (record, transaction, effects) => {
    requireVersion(record, input.version)
    const submission = requireSubmission(record, input.submissionHash)
    const { revision, sheet } = record
    const statement = approvedStatement({ number: submission.titleBlock.number, revision: revision.label }, input.purpose)
    const signature = await writeSignature({ actor, revisionId, sheetId: sheet.id, submission, meaning: 'approved', statement }, transaction)
    const issue = await Issue.create({
      id: newId(), revisionId, submissionId: submission.id, purpose: input.purpose, code: newCode(), contentHash: submission.contentHash, requestedBy: actor.id,
    }, { transaction })
    await moveRevision(revision, 'approve', transaction, effects, { purpose: input.purpose })
    await queueJob({ kind: 'pdf', uniqueKey: `pdf:${issue.id}`, payload: { issueId: issue.id } }, transaction)
    effects.audit.push({
      event: 'revision_approved', actorId: actor.id, subject: auditSubject(record),
      data: { submission: submission.id, signature: signature.id, hash: submission.contentHash, purpose: input.purpose, issue: issue.id },
    })
    return issue.id
  })
}
