/** Answers to annotations, their closing and opening again. */
import type { Transaction } from 'sequelize'
import { isStaff, type Actor } from '#shared/policies/actor'
import * as policies from '#shared/policies/annotations'
import { see } from '#shared/policies/revisions'
import type { Ability } from '#shared/types/api'
import { Annotation, AnnotationReply } from '../../database'
import { findRevisionRecord, lockRevisionRecord, type RevisionRecord } from '../../database/queries/revisionRecord'
import { authorise, authoriseSight } from '../../utils/authorise'
import { notFound } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { auditSubject } from '../revisions/transition'
import { runCommand, type Effects } from '../run'
import { now } from '../../utils/clock'

interface ThreadWork { annotation: Annotation, record: RevisionRecord, transaction: Transaction, effects: Effects }

/** Locks the annotation's revision first, as every command does. */
async function onThread<T>(actor: Actor, annotationId: string, policy: (actor: Actor, facts: policies.AnnotationFacts) => Ability, work: (on: ThreadWork) => Promise<T>): Promise<T> {
  const found = await Annotation.findByPk(annotationId, { attributes: ['revisionId'] })
  if (!found) throw notFound()
  return runCommand(async (transaction, effects) => {
    const record = await lockRevisionRecord(found.revisionId, transaction)
    const annotation = await Annotation.findByPk(annotationId, { transaction })
    if (!record || !annotation || !isStaff(actor)) throw notFound()
    authoriseSight(see(actor, record.facts))
    authorise(policy(actor, { state: annotation.state, byId: annotation.byId, revision: record.facts }))
    const result = await work({ annotation, record, transaction, effects })
    effects.changed(record.revision.id, 'check')
    return result
  })
}

/** Refuses who may not see the annotation. */
export async function requireThread(actor: Actor, annotationId: string): Promise<void> {
  const found = await Annotation.findByPk(annotationId, { attributes: ['revisionId'] })
  const record = found ? await findRevisionRecord(found.revisionId) : null
  if (!record || !isStaff(actor)) throw notFound()
  authoriseSight(see(actor, record.facts))
}

/** An answer by anyone but who raised it makes it answered; a further word of theirs opens it again. */
export const replyTo = (actor: Actor, annotationId: string, text: string): Promise<void> =>
  onThread(actor, annotationId, policies.reply, async ({ annotation, transaction }) => {
    await AnnotationReply.create({ id: newId(), annotationId, byId: actor.id, text }, { transaction })
    await annotation.update({ state: annotation.byId === actor.id ? 'open' : 'answered' }, { transaction })
  })

export const closeAnnotation = (actor: Actor, annotationId: string): Promise<void> =>
  onThread(actor, annotationId, policies.close, async ({ annotation, record, transaction, effects }) => {
    await annotation.update({ state: 'closed', closedBy: actor.id, closedAt: now() }, { transaction })
    effects.audit.push({ event: 'annotation_closed', actorId: actor.id, subject: auditSubject(record), data: { annotation: annotationId, number: annotation.number } })
  })

export const reopenAnnotation = (actor: Actor, annotationId: string): Promise<void> =>
  onThread(actor, annotationId, policies.reopen, async ({ annotation, record, transaction, effects }) => {
    await annotation.update({ state: 'open', closedBy: null, closedAt: null }, { transaction })
    effects.audit.push({ event: 'annotation_reopened', actorId: actor.id, subject: auditSubject(record), data: { annotation: annotationId, number: annotation.number } })
  })
