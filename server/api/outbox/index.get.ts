import { mayFollowAccountLinks, mayReadOutbox } from '#shared/policies/outbox'
import type { OutboxMessage } from '#shared/types/outbox'
import { outboxMessages, usesOutbox } from '../../mail'
import { presentMessage } from '../../presenters/outbox'
import { notAllowed, notFound } from '../../utils/errors'
import { requireActor } from '../../utils/session'

/** What the demonstration's mail server has kept, the newest first. There is no such page where mail really goes out. */
export default defineEventHandler(async (event): Promise<OutboxMessage[]> => {
  const actor = await requireActor(event)
  const ability = mayReadOutbox(actor)
  if (!ability.may) throw notAllowed(ability.why)
  if (!usesOutbox()) throw notFound('Messages go out by the firm’s mail server; there is no outbox here.')
  const withAccountLinks = mayFollowAccountLinks(actor).may
  return (await outboxMessages()).map(message => presentMessage(message, withAccountLinks))
})
