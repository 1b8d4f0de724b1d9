import type { Actor } from '#shared/policies/actor'
import * as policies from '#shared/policies/annotations'
import type { RevisionFacts } from '#shared/policies/revisions'
import type { AnnotationView, PersonRef, TickView } from '#shared/types/api'
import type { Annotation, AnnotationReply, Tick } from '../database'
import type { KnownPerson } from '../database/queries/people'
import type { ResolvedAnchor } from '../database/queries/anchors'
import { personRef } from './register'

type People = ReadonlyMap<string, KnownPerson>
const nobody: PersonRef = { id: '', name: '', initials: '' }

export const presentTick = (tick: Tick, people: People): TickView =>
  ({ lineId: tick.lineId, by: personRef(people, tick.checkerId) ?? nobody, at: tick.createdAt.toISOString() })

export function presentAnnotation(actor: Actor, annotation: Annotation, replies: readonly AnnotationReply[], anchor: ResolvedAnchor, revision: RevisionFacts, people: People): AnnotationView {
  const facts = { state: annotation.state, byId: annotation.byId, revision }
  return {
    id: annotation.id, number: annotation.number, kind: annotation.kind, state: annotation.state,
    by: personRef(people, annotation.byId) ?? nobody, at: annotation.createdAt.toISOString(), text: annotation.text,
    anchor: { blockId: anchor.blockId, quote: annotation.quote, from: anchor.from, to: anchor.to },
    replies: replies.filter(reply => reply.annotationId === annotation.id)
      .map(reply => ({ id: reply.id, by: personRef(people, reply.byId) ?? nobody, at: reply.createdAt.toISOString(), text: reply.text })),
    abilities: { reply: policies.reply(actor, facts).may, close: policies.close(actor, facts).may, reopen: policies.reopen(actor, facts).may },
  }
}
