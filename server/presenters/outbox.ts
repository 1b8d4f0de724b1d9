import type { OutboxMessage } from '#shared/types/outbox'
import type { KeptMessage } from '../mail'

/** Links of one-time tokens: whoever follows one first gets the account. */
const ACCOUNT_LINK = /\S*\/(?:invitation|reset)\/\S+/g

/** One message; links that open an account are left out unless `withAccountLinks`. */
export function presentMessage(message: KeptMessage, withAccountLinks: boolean): OutboxMessage {
  return {
    id: message.id,
    at: message.receivedAt,
    times: message.times,
    to: message.to,
    subject: message.subject,
    text: withAccountLinks ? message.text : message.text.replace(ACCOUNT_LINK, '(a link that only a manager sees here)'),
  }
}
