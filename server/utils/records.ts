/** Reading records for the routes that show them: scoped to who asks, 404 for what is not theirs. */
import type { Actor } from '#shared/policies/actor'
import { isStaff } from '#shared/policies/actor'
import { seeProject } from '#shared/policies/projects'
import { see } from '#shared/policies/revisions'
import type { AnnotationView, ProjectDetail, RegisterRow, RevisionView, SubmissionView, TickView } from '#shared/types/api'
import { Acceptance, Annotation, AnnotationReply, Submission, SubmissionLine, Tick } from '../database'
import { frozenAnchor, resolveAnchors } from '../database/queries/anchors'
import { peopleById } from '../database/queries/people'
import { findProjectRecord, type ProjectRecord } from '../database/queries/projects'
import { findRegisterRecords, type RegisterScope, type RegisterSearch } from '../database/queries/register'
import { findRevisionRecord, type RevisionRecord } from '../database/queries/revisionRecord'
import { revisionDetail } from '../database/queries/revisionView'
import { presentAnnotation, presentTick } from '../presenters/checks'
import { factsOfProject, presentProject } from '../presenters/projects'
import { presentRegister, withoutInternals } from '../presenters/register'
import { presentRevision, presentSubmission } from '../presenters/revisions'
import { authoriseSight } from './authorise'
import { conflict, notFound } from './errors'

/** The revision, if this person may see it. */
export async function seenRevision(actor: Actor, id: string): Promise<RevisionRecord> {
  const record = await findRevisionRecord(id)
  if (!record) throw notFound()
  authoriseSight(see(actor, record.facts))
  return record
}

export async function revisionView(actor: Actor, id: string): Promise<RevisionView> {
  return presentRevision(actor, await revisionDetail(await seenRevision(actor, id)))
}

/** The frozen content; 409 for a draft, which has none. */
export async function submissionView(actor: Actor, id: string): Promise<SubmissionView> {
  const { submission: head } = await seenRevision(actor, id)
  if (!head) throw conflict('is_draft', 'It is a draft; nothing of it is frozen.')
  const submission = await Submission.findByPk(head.id, { rejectOnEmpty: true })
  const [lines, acceptances] = await Promise.all([
    SubmissionLine.findAll({ where: { submissionId: head.id }, order: [['ord', 'ASC']] }),
    Acceptance.findAll({ where: { submissionId: head.id }, order: [['id', 'ASC']] }),
  ])
  const people = await peopleById([submission.submittedBy, ...acceptances.map(one => one.byId)])
  return presentSubmission({ submission, lines, acceptances, people })
}

export interface CheckView {
  ticks: TickView[]
  annotations: AnnotationView[]
  progress: { ticked: number, lines: number, openMustChange: number }
}

async function annotationViews(actor: Actor, { revision, submission, facts }: RevisionRecord): Promise<AnnotationView[]> {
  const annotations = await Annotation.findAll({ where: { revisionId: revision.id }, order: [['number', 'ASC']] })
  const replies = await AnnotationReply.findAll({ where: { annotationId: annotations.map(one => one.id) }, order: [['createdAt', 'ASC'], ['id', 'ASC']] })
  const moved = await resolveAnchors(revision.id, annotations.filter(one => one.submissionId !== submission?.id))
  const people = await peopleById([...annotations.map(one => one.byId), ...replies.map(one => one.byId)])
  return annotations.map(one => presentAnnotation(actor, one, replies, moved.get(one.id) ?? frozenAnchor(one), facts, people))
}

/** Ticks and annotations; the firm's own business. Ticks are those of the present submission, a former checker's too. */
export async function checkView(actor: Actor, id: string): Promise<CheckView> {
  const record = await seenRevision(actor, id)
  if (!isStaff(actor)) throw notFound()
  const { submission, facts } = record
  const ticks = submission ? await Tick.findAll({ where: { submissionId: submission.id }, order: [['createdAt', 'ASC'], ['lineId', 'ASC']] }) : []
  const people = await peopleById(ticks.map(tick => tick.checkerId))
  return {
    ticks: ticks.map(tick => presentTick(tick, people)),
    annotations: await annotationViews(actor, record),
    progress: { ticked: facts.ticked, lines: facts.lines, openMustChange: facts.openMustChange },
  }
}

/** The project, if this person may see it. */
export async function seenProject(actor: Actor, id: string): Promise<ProjectRecord> {
  const record = await findProjectRecord(id)
  if (!record) throw notFound()
  authoriseSight(seeProject(actor, factsOfProject(record)))
  return record
}

export const projectView = async (actor: Actor, id: string): Promise<ProjectDetail> => presentProject(actor, await seenProject(actor, id))

export async function registerRows(scope: RegisterScope, search?: RegisterSearch): Promise<RegisterRow[]> {
  const rows = await presentRegister(await findRegisterRecords(scope, search))
  return scope.kind === 'client' ? rows.map(withoutInternals) : rows
}
