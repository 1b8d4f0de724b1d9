/**
 * Letters. A letter is queued in the transaction that causes it, so a halt between COMMIT and sending only delays it.
 * What is guaranteed: every letter of a committed transition is sent, and once it has been recorded as sent it is never sent again.
 * Between the mail server's acceptance and that record no transaction can reach; a halt in just that moment sends the letter a
 * second time with the same Message-ID, by which mail servers and readers (and the demonstration's outbox) know it as the same one.
 */
import { createHash } from 'node:crypto'
import { SentMessage } from '../database'
import { sendLetter } from '../mail'
import { registerJob, type JobContext } from './registry'

const messageKey = (uniqueKey: string): string => createHash('sha256').update(uniqueKey).digest('hex')

async function sendOnce(payload: unknown, { id, uniqueKey, renew }: JobContext): Promise<void> {
  const messageId = messageKey(uniqueKey)
  if (await SentMessage.findByPk(messageId)) return
  if (!await renew()) return
  await sendLetter(payload, uniqueKey)
  await SentMessage.create({ messageId, jobId: id })
}

export const registerEmailJob = (): void => registerJob('email', { run: sendOnce, attempts: 12, lease: 120_000, pause: 2000 })
