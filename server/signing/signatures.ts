/** Signatures of people on submissions: written, verified, made void. */
import { QueryTypes, type Transaction } from 'sequelize'
import { canonicalText } from '#shared/document/canonical'
import type { Actor } from '#shared/policies/actor'
import type { SignatureMeaning } from '#shared/types/api'
import { sequelize, Signature, type Submission } from '../database'
import { newId } from '../utils/ids'
import { signText, verifyText } from './keys'
import { now } from '../utils/clock'

export interface Signing {
  actor: Actor
  revisionId: string
  sheetId: string
  submission: Pick<Submission, 'id' | 'contentHash' | 'resultsHash'>
  meaning: SignatureMeaning
  statement: string
  method?: string
  extent?: string
}

async function latestOfSheet(sheetId: string, transaction: Transaction): Promise<{ id: string, signature: string } | null> {
  const [row] = await sequelize.query<{ id: string, signature: string }>(
    `SELECT s.id, s.signature FROM signatures s JOIN revisions r ON r.id = s.revision_id
     WHERE r.sheet_id = ? ORDER BY s.signed_at DESC, s.id DESC LIMIT 1`,
    { replacements: [sheetId], type: QueryTypes.SELECT, transaction },
  )
  return row ?? null
}

/**
 * Puts a person's name to a submission. The signature is over the canonical text of who, what it means, both hashes, when,
 * and the signature before it on this sheet. The caller holds the revision's lock.
 */
export async function writeSignature(signing: Signing, transaction: Transaction): Promise<Signature> {
  const { actor, submission, meaning, statement } = signing
  const previous = await latestOfSheet(signing.sheetId, transaction)
  const id = newId()
  const signedAt = now()
  const payloadJson = canonicalText({
    id, revision: signing.revisionId, submission: submission.id,
    contentHash: submission.contentHash, resultsHash: submission.resultsHash,
    signer: { id: actor.id, name: actor.name }, meaning, statement,
    method: signing.method ?? null, extent: signing.extent ?? null,
    at: signedAt.toISOString(), previous,
  })
  return Signature.create({
    id, revisionId: signing.revisionId, submissionId: submission.id, meaning, userId: actor.id, signerName: actor.name, statement,
    method: signing.method ?? null, extent: signing.extent ?? null, hash: submission.contentHash, payloadJson,
    ...await signText(payloadJson), previousId: previous?.id ?? null, signedAt,
  }, { transaction })
}

/** Strikes out the signatures that stand on a submission; they stay in the record with the reason. */
export async function voidSignatures(submissionId: string, reason: string, transaction: Transaction, only?: SignatureMeaning): Promise<void> {
  await Signature.update(
    { voidedAt: now(), voidReason: reason },
    { where: { submissionId, voidedAt: null, ...(only ? { meaning: only } : {}) }, transaction },
  )
}

/** Whether the row says what was signed, and the signature is of that text. */
export async function signatureHolds(row: Signature): Promise<boolean> {
  const payload = JSON.parse(row.payloadJson) as Record<string, unknown>
  const same = payload.id === row.id && payload.submission === row.submissionId && payload.contentHash === row.hash
    && payload.meaning === row.meaning && payload.statement === row.statement && payload.at === row.signedAt.toISOString()
    && canonicalText(payload) === row.payloadJson
  return same && await verifyText(row.payloadJson, { signature: row.signature, keyId: row.keyId })
}
