/** A firm in small, and the steps of a sheet through it as each person takes them: by the API. */
import { expect, vi } from 'vitest'
import { createClientOrganisation, createPerson, PASSWORD, signedIn, unique } from '../../helpers/people'
import type { Person } from '../../helpers/people'
import type { Client } from '../../helpers/client'
import type { SheetDocument } from '../../../shared/document/types'
import type { ProjectDetail, RevisionView, SubmissionView, SubmitReview } from '../../../shared/types/api'

export interface Office {
  people: Record<'engineer' | 'checker' | 'manager' | 'client', Person>
  engineer: Client
  checker: Client
  manager: Client
  client: Client
  organisation: { id: string, name: string }
  project: ProjectDetail
}

async function made<T>(answer: Promise<{ status: number, body: T }>, status = 200): Promise<T> {
  const { status: got, body } = await answer
  expect(got, JSON.stringify(body)).toBe(status)
  return body
}

export async function openOffice(url?: string): Promise<Office> {
  const organisation = await createClientOrganisation()
  const people = {
    engineer: await createPerson({ roles: ['engineer'] }),
    checker: await createPerson({ roles: ['checker'] }),
    manager: await createPerson({ roles: ['manager'] }),
    client: await createPerson({ roles: ['client'], organisationId: organisation.id }),
  }
  const manager = await signedIn(people.manager, url)
  const project = await made(manager.post<ProjectDetail>('/api/projects', {
    jobNumber: unique('J'), title: 'Harbour crossing', clientId: organisation.id,
    memberIds: [people.engineer.id, people.checker.id], managerIds: [people.manager.id],
  }), 201)
  const [engineer, checker, client] = await Promise.all([people.engineer, people.checker, people.client].map(one => signedIn(one, url)))
  return { people, organisation, project, manager, engineer: engineer!, checker: checker!, client: client! }
}

export const revisionOf = (client: Client, id: string): Promise<RevisionView> => made(client.get<RevisionView>(`/api/revisions/${id}`))

/** Writes the document as the engineer's own edits. */
export async function write(office: Office, revisionId: string, document: SheetDocument): Promise<void> {
  const { writeDocument } = await import('../../../server/database/seed/steps')
  const { id, name, initials, roles } = office.people.engineer
  await writeDocument({ id, name, initials, roles, organisationId: null, sessionId: '' }, revisionId, document)
}

export async function newSheet(office: Office, document: SheetDocument): Promise<string> {
  const { revisionId } = await made(office.engineer.post<{ revisionId: string }>(`/api/projects/${office.project.id}/sheets`, { number: unique('S-'), title: 'Auxiliary supply, input filter' }), 201)
  await write(office, revisionId, document)
  return revisionId
}

export async function submit(office: Office, revisionId: string): Promise<void> {
  const review = await made(office.engineer.get<SubmitReview>(`/api/revisions/${revisionId}/submit-review`))
  const { version } = await revisionOf(office.engineer, revisionId)
  const acceptances = review.findings.filter(one => one.mustMend || one.kind !== 'caution').map(({ lineId, what }) => ({ lineId, what, reason: 'Agreed for this test.' }))
  await made(office.engineer.post(`/api/revisions/${revisionId}/submit`, {
    version, hash: review.hash, checkerId: office.people.checker.id, due: '2030-01-15', acceptances, password: PASSWORD,
  }))
}

export async function sign(office: Office, revisionId: string): Promise<void> {
  const { lines, hash } = await made(office.checker.get<SubmissionView>(`/api/revisions/${revisionId}/submission`))
  for (const line of lines) await office.checker.put(`/api/revisions/${revisionId}/ticks/${line.lineId}`)
  const { version } = await revisionOf(office.checker, revisionId)
  await made(office.checker.post(`/api/revisions/${revisionId}/sign`, { version, submissionHash: hash, method: 'line_by_line', extent: 'Every line.', password: PASSWORD }))
}

export async function approve(office: Office, revisionId: string, purpose = 'construction'): Promise<void> {
  const { version, submissionHash } = await revisionOf(office.manager, revisionId)
  await made(office.manager.post(`/api/revisions/${revisionId}/approve`, { version, submissionHash, purpose, password: PASSWORD }))
}

/** Through all states up to the approval. */
export async function bringToIssue(office: Office, revisionId: string): Promise<void> {
  await submit(office, revisionId)
  await sign(office, revisionId)
  await approve(office, revisionId)
}

/** Resolves when the revision has come to `state`. */
export async function reached(office: Office, revisionId: string, state: RevisionView['state']): Promise<RevisionView> {
  return vi.waitFor(async () => {
    const revision = await revisionOf(office.manager, revisionId)
    expect(revision.state).toBe(state)
    return revision
  }, { timeout: 100_000, interval: 250 })
}
