/** A message of the demonstration's outbox, as a page shows it. */
export interface OutboxMessage {
  id: string
  at: string
  /** More than once when a sending was repeated after a fault; a mail reader shows such a message once. */
  times: number
  to: { name: string, address: string }[]
  subject: string
  text: string
}
