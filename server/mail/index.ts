/** E-mail: one function to send, one to send a letter. Callers that write to the database queue an `email` job instead. */
import { join } from 'node:path'
import { createTransport } from 'nodemailer'
import type { Transporter } from 'nodemailer'
import { outsideSettings } from '../utils/outside'
import { letterSchema, letterText } from './letters'
import { mailOptions } from './message'
import type { MailMessage } from './message'
import { keptMessages, openOutbox } from './outbox'
import type { KeptMessage, Outbox } from './outbox'

export type { Letter } from './letters'
export type { MailMessage } from './message'
export type { KeptMessage } from './outbox'

interface Post { transport: Transporter, outbox: Outbox | null }
let post: Promise<Post> | null = null

const TIMEOUTS = { connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 30_000 }
const outboxFolder = () => join(outsideSettings().dataDir, 'outbox')

async function openPost(): Promise<Post> {
  const { smtpUrl } = outsideSettings()
  if (smtpUrl) return { transport: createTransport({ url: smtpUrl, ...TIMEOUTS }), outbox: null }
  const outbox = await openOutbox(outboxFolder())
  return { transport: createTransport({ host: '127.0.0.1', port: outbox.port, secure: false, ignoreTLS: true, ...TIMEOUTS }), outbox }
}

/**
 * Hands the message to the mail server; resolves when that has taken responsibility for it, rejects otherwise.
 * Repeated with the same key it carries the same Message-ID.
 */
export async function sendMail(message: MailMessage): Promise<void> {
  post ??= openPost().catch((error: unknown) => {
    post = null
    throw error
  })
  const { transport } = await post
  await transport.sendMail(mailOptions(message, outsideSettings().mailFrom))
}

/** Sends the letter that an `email` job carries; throws when `payload` is not one. */
export async function sendLetter(payload: unknown, key: string): Promise<void> {
  const letter = letterSchema.parse(payload)
  await sendMail({ key, to: letter.to, ...letterText(letter, outsideSettings().siteUrl) })
}

/** True when messages go to the demonstration's outbox and to no one else. */
export const usesOutbox = (): boolean => outsideSettings().smtpUrl === ''

/** What the demonstration's outbox holds, the newest first. */
export const outboxMessages = (): Promise<KeptMessage[]> => keptMessages(outboxFolder())

export async function closeMail(): Promise<void> {
  const open = await post?.catch(() => null)
  post = null
  open?.transport.close()
  await open?.outbox?.close()
}
