/** Projects, sheets and their way through the firm, made over the API as their people would. */
import * as Y from 'yjs'
import { updateYFragment } from '@tiptap/y-tiptap'
import { needsAnswer } from '../../shared/document/findings'
import { sheetSchema } from '../../shared/document/schema'
import type { LineNode, SheetDocument } from '../../shared/document/types'
import { FRAGMENT } from '../../shared/document/yjs'
import type { IssuePurpose, ProjectDetail, RevisionView, SubmitReview } from '../../shared/types/api'
import type { Answer, Client } from './client'
import { createClientOrganisation, createClientPerson, createPerson, PASSWORD, signedIn, unique, type Person } from './people'

export type Signed = Person & { api: Client & { sessionId: string } }

export async function signedPerson(given: Parameters<typeof createPerson>[0] = {}): Promise<Signed> {
  const person = await createPerson(given)
  return { ...person, api: await signedIn(person) }
}

export interface Firm {
  projectId: string
  engineer: Signed, colleague: Signed, checker: Signed, secondChecker: Signed, manager: Signed, secondManager: Signed
  /** A person of the project's client, and one of another client. */
  client: Signed, foreignClient: Signed
  /** An engineer of the firm who is not in the project. */
  outsider: Signed
}

/** A project with people in every role; `scheme` and `level` as given. */
export async function createFirm({ scheme = 'letters', level = 2 }: { scheme?: 'letters' | 'numbers', level?: 1 | 2 | 3 } = {}): Promise<Firm> {
  const organisation = await createClientOrganisation()
  const [engineer, colleague, checker, secondChecker, manager, secondManager, outsider] = await Promise.all([
    signedPerson(), signedPerson(), signedPerson({ roles: ['checker', 'engineer'] }), signedPerson({ roles: ['checker'] }),
    signedPerson({ roles: ['manager'] }), signedPerson({ roles: ['manager', 'checker'] }), signedPerson(),
  ])
  const people = await Promise.all([createClientPerson(organisation.id), createClientPerson()])
  const [client, foreignClient] = await Promise.all(people.map(async person => ({ ...person, api: await signedIn(person) })))
  const { status, body } = await manager.api.post<ProjectDetail>('/api/projects', {
    jobNumber: unique('J'), title: 'Shore supply', clientId: organisation.id, revisionScheme: scheme, checkLevel: level,
    memberIds: [engineer, colleague, checker, secondChecker].map(one => one.id), managerIds: [manager.id, secondManager.id],
  })
  if (status !== 201) throw new Error(`No project: ${JSON.stringify(body)}`)
  return { projectId: body.id, engineer, colleague, checker, secondChecker, manager, secondManager, client: client!, foreignClient: foreignClient!, outsider }
}

export interface TestLine { id: string, source: string, reference?: string, status?: LineNode['attrs']['status'] }

export const calculation = (...lines: TestLine[]): SheetDocument => ({
  type: 'doc',
  content: [
    { type: 'paragraph', attrs: { id: 'intro', reference: '' }, content: [{ type: 'text', text: 'Corner of the input filter.' }] },
    {
      type: 'calculation',
      attrs: { id: 'calc', reference: '' },
      content: lines.map(({ id, source, reference = '', status = null }) => ({
        type: 'line',
        attrs: { id, status },
        content: [
          { type: 'source', ...(source ? { content: [{ type: 'text', text: source }] } : {}) },
          { type: 'reference', ...(reference ? { content: [{ type: 'text', text: reference }] } : {}) },
        ],
      })),
    },
  ],
})

/** A sheet without findings: 1/(2·pi·1 kohm·100 nF) = 1.592 kHz. */
export const FILTER: TestLine[] = [
  { id: 'r', source: 'R = 1 kohm', reference: 'Client data sheet, rev. B', status: 'given' },
  { id: 'c', source: 'C = 100 nF', reference: 'Chosen from stock', status: 'assumed' },
  { id: 'f', source: 'f_c = 1/(2*pi*R*C) to kHz' },
  { id: 'q', source: 'f_c <= 2 kHz', reference: 'Specification 4.2' },
]
export const FILTER_ROWS = ['intro', 'r', 'c', 'f', 'q']

const collaboration = () => import('../../server/collab/log')
const database = () => import('../../server/database')

/** Makes the draft read like `document`, as edits of this person. */
export async function write(who: Pick<Person, 'id'>, revisionId: string, document: SheetDocument): Promise<void> {
  const [{ createSheetLog }, { sequelize }] = [await collaboration(), await database()]
  const log = createSheetLog(sequelize)
  const loaded = await log.load(revisionId)
  if (!loaded) throw new Error('There is no such document.')
  const ydoc = new Y.Doc()
  Y.applyUpdate(ydoc, loaded.update)
  const before = Y.encodeStateVector(ydoc)
  updateYFragment(ydoc, ydoc.getXmlFragment(FRAGMENT), sheetSchema.nodeFromJSON(document), { mapping: new Map(), isOMark: new Map() })
  const bytes = Y.encodeStateAsUpdate(ydoc, before)
  const outcome = await log.append(revisionId, loaded.epoch, loaded.nextSeq - 1, [{ bytes, userId: who.id, newClients: [ydoc.clientID] }])
  ydoc.destroy()
  if (outcome.kind !== 'committed') throw new Error(`Not written: ${outcome.kind}`)
}

export async function view(who: Signed, revisionId: string): Promise<RevisionView> {
  const { status, body } = await who.api.get<RevisionView>(`/api/revisions/${revisionId}`)
  if (status !== 200) throw new Error(`Not seen: ${JSON.stringify(body)}`)
  return body
}

/** A draft by the firm's engineer. */
export async function createDraft(firm: Firm, document: SheetDocument = calculation(...FILTER)): Promise<string> {
  const { body } = await firm.engineer.api.post<{ revisionId: string }>(`/api/projects/${firm.projectId}/sheets`, { number: unique('S-'), title: 'Input filter' })
  await write(firm.engineer, body.revisionId, document)
  return body.revisionId
}

export async function submission(who: Signed, revisionId: string, checker: Person): Promise<Record<string, unknown>> {
  const { body } = await who.api.get<SubmitReview>(`/api/revisions/${revisionId}/submit-review`)
  const { version } = await view(who, revisionId)
  return {
    version, hash: body.hash, checkerId: checker.id, due: '2030-05-06', password: PASSWORD,
    acceptances: body.findings.filter(needsAnswer).map(({ lineId, what }) => ({ lineId, what, reason: 'Agreed with the client.' })),
  }
}

/** Resolves to the answer of the last step; earlier steps must succeed. */
async function done<T>(answer: Promise<Answer<T>>): Promise<T> {
  const { status, body } = await answer
  if (status >= 300) throw new Error(`${status}: ${JSON.stringify(body)}`)
  return body
}

export async function submitted(firm: Firm, revisionId?: string): Promise<string> {
  const id = revisionId ?? await createDraft(firm)
  await done(firm.engineer.api.post(`/api/revisions/${id}/submit`, await submission(firm.engineer, id, firm.checker)))
  return id
}

export async function tickAll(checker: Signed, revisionId: string): Promise<void> {
  const { body } = await checker.api.get<{ lines: { lineId: string }[] }>(`/api/revisions/${revisionId}/submission`)
  for (const { lineId } of body.lines) await done(checker.api.put(`/api/revisions/${revisionId}/ticks/${encodeURIComponent(lineId)}`))
}

export async function frozen(who: Signed, revisionId: string): Promise<{ version: number, submissionHash: string | null }> {
  const { version, submissionHash } = await view(who, revisionId)
  return { version, submissionHash }
}

export const signing = async (who: Signed, id: string) =>
  ({ ...await frozen(who, id), method: 'line_by_line', extent: 'All lines.', password: PASSWORD })

export const approval = async (who: Signed, id: string, purpose: IssuePurpose = 'approval') => ({ ...await frozen(who, id), purpose, password: PASSWORD })

export async function checked(firm: Firm, revisionId?: string): Promise<string> {
  const id = await submitted(firm, revisionId)
  await tickAll(firm.checker, id)
  await done(firm.checker.api.post(`/api/revisions/${id}/sign`, await signing(firm.checker, id)))
  return id
}

/** Approves so that the server's own job does not take it for an hour, and gives the issue a file without one being made. */
export async function issued(firm: Firm, { revisionId, purpose = 'approval' }: { revisionId?: string, purpose?: IssuePurpose } = {}): Promise<{ id: string, issueId: string }> {
  const { id, issueId } = await issuing(firm, { revisionId, purpose })
  const { completeIssue } = await import('../../server/commands/revisions/completeIssue')
  await completeIssue(issueId, { key: `none:${unique()}`, sha256: 'a'.repeat(64), size: 1 })
  return { id, issueId }
}

export async function issuing(firm: Firm, { revisionId, purpose = 'approval' }: { revisionId?: string, purpose?: IssuePurpose } = {}): Promise<{ id: string, issueId: string }> {
  const id = await checked(firm, revisionId)
  const { approveRevision } = await import('../../server/commands/revisions/approveRevision')
  const { during } = await import('../../server/utils/clock')
  const { version, submissionHash } = await frozen(firm.manager, id)
  const actor = { ...firm.manager, sessionId: firm.manager.api.sessionId }
  const issueId = await during(new Date(Date.now() + 3_600_000), () => approveRevision(actor, id, { version, submissionHash: submissionHash ?? '', purpose }))
  return { id, issueId }
}
