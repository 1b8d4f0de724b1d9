import type { Actor } from '#shared/policies/actor'
import { whyNotChecker } from '#shared/policies/checkers'
import type { PersonRef } from '#shared/types/api'
import type { ProjectRecord } from '../database/queries/projects'
import { notFound } from './errors'
import { seenRevision } from './records'

/** The checkers of a project in order of name; for a revision only those independent of it and of who asks them. */
export async function checkerCandidates(actor: Actor, { project, members, managers }: ProjectRecord, revisionId?: string): Promise<PersonRef[]> {
  const people = [...new Map([...members, ...managers].map(person => [person.id, person])).values()]
    .filter(person => !person.disabled && person.roles.includes('checker'))
    .sort((a, b) => (a.name < b.name ? -1 : 1))
  const record = revisionId ? await seenRevision(actor, revisionId) : null
  if (record && record.project.id !== project.id) throw notFound()
  return people
    .filter(person => !record || whyNotChecker(person, record.facts, record.facts.state === 'draft' ? actor.id : null) === null)
    .map(({ id, name, initials }) => ({ id, name, initials }))
}
