/** A message as it is handed to nodemailer: nothing that a person typed reaches a header unfiltered. */
import { createHash } from 'node:crypto'
import type { SendMailOptions } from 'nodemailer'

export interface MailMessage {
  /** Unique for this one sending, such as the job's unique key; a repetition has the same one. */
  key: string
  to: { name: string, address: string }
  subject: string
  text: string
}

/** Header text without control characters, so that no one can add a header by a line break. */
export function headerText(text: string): string {
  // eslint forbids control characters in expressions, hence the property.
  return text.replace(/\p{Cc}+/gu, ' ').trim().slice(0, 400)
}

/** The same for every repetition of one sending (RFC 5322 `msg-id`). */
export function messageId(key: string, domain: string): string {
  return `<${createHash('sha256').update(key).digest('hex').slice(0, 40)}@${domain}>`
}

/** Throws when the address is not one mailbox: a list or a group in it would mail strangers. */
export function mailOptions(message: MailMessage, from: { name: string, address: string }): SendMailOptions {
  const address = message.to.address
  if (!/^[^\s<>()[\]\\,;:"@]+@[^\s<>()[\]\\,;:"@]+$/.test(address)) throw new Error('The recipient is not a single e-mail address.')
  const domain = from.address.split('@')[1] ?? 'localhost'
  return {
    from: { name: headerText(from.name), address: from.address },
    to: [{ name: headerText(message.to.name), address }],
    envelope: { from: from.address, to: [address] },
    subject: headerText(message.subject),
    text: message.text,
    messageId: messageId(message.key, domain),
    headers: { 'Auto-Submitted': 'auto-generated' },
    disableFileAccess: true,
    disableUrlAccess: true,
  }
}
