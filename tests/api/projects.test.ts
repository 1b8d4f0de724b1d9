import { describe, expect, it } from 'vitest'
import type { ProjectDetail, ProjectReferenceView, ProjectSummary, RegisterRow, RevisionView } from '../../shared/types/api'
import { RevisionSnapshot, Contributor } from '../../server/database'
import type { RefusalBody } from '../helpers/client'
import { createClientOrganisation, unique } from '../helpers/people'
import { calculation, checked, createDraft, createFirm, FILTER, issued, signedPerson, submitted, view, write } from '../helpers/records'

const PNG = Buffer.from('iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg==', 'base64')

describe('a project', () => {
  const input = async () => {
    const [manager, engineer] = await Promise.all([signedPerson({ roles: ['manager'] }), signedPerson()])
    const body = { jobNumber: unique('J'), title: 'Pumping station', clientId: (await createClientOrganisation()).id, memberIds: [engineer.id], managerIds: [manager.id] }
    return { manager, engineer, body }
  }

  it('is set up by a manager, with what the firm usually takes where nothing is said', async () => {
    const { manager, engineer, body } = await input()
    const answer = await manager.api.post<ProjectDetail>('/api/projects', body)
    expect(answer.status).toBe(201)
    expect(answer.body).toMatchObject({
      jobNumber: body.jobNumber, revisionScheme: 'letters', checkLevel: 2, archived: false, members: [{ id: engineer.id }], managers: [{ id: manager.id }], sheetCount: 0,
      abilities: { edit: true, createSheet: true },
    })
    expect(answer.body.relianceNotice).toContain('Nobody else may rely on it')
    expect((await engineer.api.get<ProjectSummary[]>('/api/projects')).body.map(one => one.id)).toEqual([answer.body.id])
  })

  it.each<[string, object, string]>([
    ['an empty job number', { jobNumber: ' ' }, 'jobNumber'],
    ['a title that is too long', { title: 'x'.repeat(201) }, 'title'],
    ['no manager', { managerIds: [] }, 'managerIds'],
    ['an unknown client', { clientId: '01J00000000000000000000000' }, 'clientId'],
    ['an unknown member', { memberIds: ['01J00000000000000000000000'] }, 'memberIds.0'],
    ['a check level that there is not', { checkLevel: 4 }, 'checkLevel'],
  ])('with %s is refused at that field', async (_name, change, field) => {
    const { manager, body } = await input()
    const answer = await manager.api.post<RefusalBody>('/api/projects', { ...body, ...change })
    expect([answer.status, answer.body.data.field]).toEqual([400, field])
  })

  it('has a job number of its own, also when two are set up at once', async () => {
    const { manager, body } = await input()
    const answers = await Promise.all([1, 2].map(() => manager.api.post<RefusalBody>('/api/projects', body)))
    expect(answers.map(answer => answer.status).sort()).toEqual([201, 400])
    expect(answers.find(answer => answer.status === 400)?.body.data).toMatchObject({ field: 'jobNumber', code: 'job_number_taken' })
  })

  it('names as manager only a manager, and as member only the firm\'s people', async () => {
    const firm = await createFirm()
    const members = `/api/projects/${firm.projectId}/members`
    expect((await firm.manager.api.put<RefusalBody>(members, { memberIds: [], managerIds: [firm.engineer.id] })).body.data.field).toBe('managerIds.0')
    expect((await firm.manager.api.put<RefusalBody>(members, { memberIds: [firm.client.id], managerIds: [firm.manager.id] })).body.data.field).toBe('memberIds.0')
    expect((await firm.engineer.api.put(members, { memberIds: [], managerIds: [firm.manager.id] })).status).toBe(403)
    expect((await firm.manager.api.put<ProjectDetail>(members, { memberIds: [firm.colleague.id], managerIds: [firm.manager.id] })).body.members).toMatchObject([{ id: firm.colleague.id }])
    expect((await firm.engineer.api.get(`/api/projects/${firm.projectId}`)).status).toBe(404)
  })

  it('that is archived is read and not worked on', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    expect((await firm.manager.api.patch<ProjectDetail>(`/api/projects/${firm.projectId}`, { archived: true })).body.archived).toBe(true)
    expect((await firm.engineer.api.post(`/api/projects/${firm.projectId}/sheets`, { number: 'S-1', title: 'T' })).status).toBe(409)
    expect((await view(firm.engineer, id)).abilities.edit.may).toBe(false)
    expect((await firm.manager.api.patch<ProjectDetail>(`/api/projects/${firm.projectId}`, { archived: false })).body.archived).toBe(false)
  })

  it('keeps a list of what its sheets cite', async () => {
    const firm = await createFirm()
    const path = `/api/projects/${firm.projectId}/references`
    const standard = { kind: 'standard', designation: 'IEC 60063', title: 'Preferred number series for resistors and capacitors', edition: '2015' }
    const { status, body } = await firm.engineer.api.post<ProjectReferenceView>(path, standard)
    expect([status, body]).toEqual([201, { id: body.id, ...standard }])
    expect((await firm.engineer.api.post<RefusalBody>(path, standard)).body.data.code).toBe('reference_taken')
    expect((await firm.engineer.api.patch<ProjectReferenceView>(`${path}/${body.id}`, { ...standard, edition: '2023' })).body.edition).toBe('2023')
    expect((await firm.outsider.api.delete(`${path}/${body.id}`)).status).toBe(404)
    expect((await firm.engineer.api.delete(`${path}/${body.id}`)).status).toBe(204)
    expect((await firm.engineer.api.get(path)).body).toEqual([])
  })
})

describe('a sheet', () => {
  it('has a number once in its project, also when two start it at once', async () => {
    const firm = await createFirm()
    const number = unique('S-')
    const answers = await Promise.all([firm.engineer, firm.colleague].map(who => who.api.post<RefusalBody>(`/api/projects/${firm.projectId}/sheets`, { number, title: 'Filter' })))
    expect(answers.map(answer => answer.status).sort()).toEqual([201, 400])
    expect(answers.find(answer => answer.status === 400)?.body.data).toMatchObject({ field: 'number', code: 'number_taken' })
  })

  it('begins blank with a document that nobody counts as having written', async () => {
    const firm = await createFirm()
    const { body } = await firm.engineer.api.post<{ revisionId: string }>(`/api/projects/${firm.projectId}/sheets`, { number: unique('S-'), title: 'Filter', from: '' })
    expect(await RevisionSnapshot.count({ where: { revisionId: body.revisionId, seq: 0 } })).toBe(1)
    expect(await Contributor.count({ where: { revisionId: body.revisionId } })).toBe(0)
  })

  it('started from an earlier one has its content and brings its contributors', async () => {
    const firm = await createFirm()
    const draft = await createDraft(firm)
    await write(firm.colleague, draft, calculation(...FILTER, { id: 'x', source: '# Together.' }))
    const from = await submitted(firm, draft)
    const { body } = await firm.secondChecker.api.post<{ revisionId: string }>(`/api/projects/${firm.projectId}/sheets`, { number: unique('S-'), title: 'Like it', from })
    const copy = await view(firm.secondChecker, body.revisionId)
    expect(copy.contributors.map(one => [one.id, one.inherited]).sort()).toEqual([[firm.engineer.id, true], [firm.colleague.id, true]].sort())
    const review = await firm.secondChecker.api.get<{ hash: string }>(`/api/revisions/${body.revisionId}/submit-review`)
    expect(review.body.hash).toBe((await view(firm.engineer, from)).submissionHash)
    const foreign = await createFirm()
    expect((await foreign.engineer.api.post<RefusalBody>(`/api/projects/${foreign.projectId}/sheets`, { number: 'S-9', title: 'T', from })).body.data.field).toBe('from')
  })

  it('is renamed while it is a draft; what was frozen keeps its title block, what was issued its number', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    const settings = { significantDigits: 5, paper: 'Letter' }
    expect((await firm.colleague.api.patch<RevisionView>(`/api/revisions/${id}`, { title: 'Output filter', settings })).body).toMatchObject({ title: 'Output filter', settings, version: 2 })
    expect((await firm.colleague.api.patch<RefusalBody>(`/api/revisions/${id}`, { settings: { ...settings, significantDigits: 40 } })).body.data.field).toBe('settings.significantDigits')
    await issued(firm, { revisionId: id })
    expect((await firm.engineer.api.patch(`/api/revisions/${id}`, { title: 'Too late' })).status).toBe(409)
    const { body } = await firm.engineer.api.post<{ revisionId: string }>(`/api/revisions/${id}/revise`, { reason: 'Another load.' })
    expect((await firm.engineer.api.patch<RefusalBody>(`/api/revisions/${body.revisionId}`, { number: 'S-new' })).body.data.code).toBe('number_issued')
    await firm.engineer.api.patch(`/api/revisions/${body.revisionId}`, { title: 'Output filter, heavy load' })
    expect((await view(firm.client, id)).title).toBe('Output filter')
  })
})

describe('registers and lists', () => {
  it('filter, search and sort', async () => {
    const firm = await createFirm()
    const start = async (number: string, title: string) => (await firm.engineer.api.post<{ revisionId: string }>(`/api/projects/${firm.projectId}/sheets`, { number, title })).body.revisionId
    const [a, b] = [await start('S-2', 'Input filter'), await start('S-1', 'Snubber 100 %')]
    await write(firm.engineer, a, calculation(...FILTER))
    await submitted(firm, a)
    const register = async (query: string) => (await firm.engineer.api.get<RegisterRow[]>(`/api/projects/${firm.projectId}/register${query}`)).body.map(row => row.revisionId)
    expect(await register('')).toEqual([b, a])
    expect(await register('?sort=-number')).toEqual([a, b])
    expect(await register('?sort=state')).toEqual([b, a])
    expect(await register('?state=for_checking,checked')).toEqual([a])
    expect(await register(`?q=${encodeURIComponent('100 %')}`)).toEqual([b])
    expect(await register(`?q=${encodeURIComponent('%')}`)).toEqual([b])
    expect(await register(`?q=${encodeURIComponent(firm.checker.name)}`)).toEqual([a])
    expect((await firm.engineer.api.get(`/api/projects/${firm.projectId}/register?sort=colour`)).status).toBe(400)
    expect((await firm.outsider.api.get(`/api/projects/${firm.projectId}/register`)).status).toBe(404)
  })

  it('show one row a sheet: its open revision, else its last', async () => {
    const firm = await createFirm()
    const { id } = await issued(firm)
    const register = async () => (await firm.engineer.api.get<RegisterRow[]>(`/api/projects/${firm.projectId}/register`)).body
    expect(await register()).toMatchObject([{ revisionId: id, state: 'issued', approvedBy: { id: firm.manager.id }, checkedBy: { id: firm.checker.id } }])
    const { body } = await firm.colleague.api.post<{ revisionId: string }>(`/api/revisions/${id}/revise`, { reason: 'Another load.' })
    expect(await register()).toMatchObject([{ revisionId: body.revisionId, state: 'draft', awaiting: { id: firm.colleague.id } }])
    await firm.colleague.api.post(`/api/revisions/${body.revisionId}/cancel`, { version: 1 })
    expect(await register()).toMatchObject([{ revisionId: id, state: 'issued' }])
  })

  it('hold what each role has to do, and nothing of others', async () => {
    const firm = await createFirm()
    const atChecker = await submitted(firm)
    const atManager = await checked(firm)
    const draft = await createDraft(firm)
    const list = async (who: keyof typeof firm & ('engineer' | 'checker' | 'manager' | 'client' | 'foreignClient' | 'colleague'), path: string) => (await firm[who].api.get<RegisterRow[]>(path)).body
    expect((await list('engineer', '/api/work')).map(row => row.revisionId).sort()).toEqual([atChecker, atManager, draft].sort())
    expect(await list('colleague', '/api/work')).toEqual([])
    expect(await list('checker', '/api/queue')).toMatchObject([{ revisionId: atChecker, awaiting: { id: firm.checker.id }, ticked: 0, lines: 5, due: '2030-05-06' }])
    const board = (await list('manager', '/api/board')).filter(row => row.projectId === firm.projectId)
    expect(board.map(row => [row.revisionId, row.awaiting?.id])).toEqual(expect.arrayContaining([[atChecker, firm.checker.id], [draft, firm.engineer.id]]))
    const { id } = await issued(firm)
    expect(await list('client', '/api/issued')).toMatchObject([{ revisionId: id, state: 'issued', checker: null, ticked: null }])
    expect(await list('foreignClient', '/api/issued')).toEqual([])
    for (const path of ['/api/work', '/api/queue', '/api/board', '/api/projects']) expect((await firm.client.api.get(path)).status).toBe(403)
    expect((await firm.engineer.api.get('/api/board')).status).toBe(403)
    expect((await firm.engineer.api.get('/api/issued')).status).toBe(403)
  })
})

describe('what a client sees of an issued revision', () => {
  it('is the sheet and its signatures, not the firm\'s work on it', async () => {
    const firm = await createFirm()
    const { id } = await issued(firm)
    const { body: { revisionId } } = await firm.engineer.api.post<{ revisionId: string }>(`/api/revisions/${id}/revise`, { reason: 'Another load.' })
    const seen = await view(firm.client, id)
    expect(seen).toMatchObject({ state: 'issued', checker: null, due: null, contributors: [], preparedBy: { id: firm.engineer.id } })
    expect(seen.revisions.map(one => one.id)).toEqual([id])
    expect((await firm.client.api.get(`/api/revisions/${id}/submission`)).status).toBe(200)
    expect((await firm.client.api.get(`/api/revisions/${id}/check`)).status).toBe(404)
    expect((await firm.client.api.get(`/api/revisions/${revisionId}`)).status).toBe(404)
    expect((await firm.foreignClient.api.get(`/api/revisions/${id}`)).status).toBe(404)
  })
})

describe('a picture', () => {
  const upload = (bytes: Uint8Array<ArrayBuffer>, name = 'photo.png') => {
    const form = new FormData()
    form.append('file', new Blob([bytes]), name)
    return form
  }

  it('is known by its bytes, kept once, and shown to who may see its sheet', async () => {
    const firm = await createFirm()
    const path = `/api/projects/${firm.projectId}/attachments`
    const first = await firm.engineer.api.post<{ id: string }>(path, upload(Buffer.from(PNG), '../../etc/photo.svg'))
    expect(first.status).toBe(201)
    expect((await firm.colleague.api.post<{ id: string }>(path, upload(Buffer.from(PNG)))).body.id).toBe(first.body.id)
    const shown = await firm.colleague.api.raw('GET', `/api/attachments/${first.body.id}`)
    expect([shown.status, shown.headers.get('content-type'), shown.headers.get('x-content-type-options')]).toEqual([200, 'image/png', 'nosniff'])
    expect(Buffer.from(await shown.arrayBuffer()).equals(PNG)).toBe(true)
    for (const other of [firm.outsider, firm.client, firm.foreignClient]) expect((await other.api.raw('GET', `/api/attachments/${first.body.id}`)).status).toBe(404)

    const draft = await createDraft(firm)
    const document = calculation(...FILTER)
    await write(firm.engineer, draft, { type: 'doc', content: [...document.content, { type: 'figure', attrs: { id: 'fig', reference: '', attachment: first.body.id, caption: 'Rig', alt: 'Rig' } }] })
    await issued(firm, { revisionId: draft })
    expect((await firm.client.api.raw('GET', `/api/attachments/${first.body.id}`)).status).toBe(200)
    expect((await firm.foreignClient.api.raw('GET', `/api/attachments/${first.body.id}`)).status).toBe(404)
  })

  it.each([['a drawing that is a program', '<svg xmlns="http://www.w3.org/2000/svg"><script/></svg>'], ['a page', '<!doctype html><p>'], ['nothing', '']])('is not %s', async (_name, content) => {
    const firm = await createFirm()
    const answer = await firm.engineer.api.post<RefusalBody>(`/api/projects/${firm.projectId}/attachments`, upload(Buffer.from(content)))
    expect([answer.status, answer.body.data.field]).toEqual([400, 'file'])
  })

  it('is not taken from who is no member', async () => {
    const firm = await createFirm()
    expect((await firm.outsider.api.post(`/api/projects/${firm.projectId}/attachments`, upload(Buffer.from(PNG)))).status).toBe(404)
  })

  it('of another project stops a submission', async () => {
    const [firm, other] = [await createFirm(), await createFirm()]
    const { body } = await other.engineer.api.post<{ id: string }>(`/api/projects/${other.projectId}/attachments`, upload(Buffer.from(PNG)))
    const draft = await createDraft(firm, { type: 'doc', content: [{ type: 'figure', attrs: { id: 'fig', reference: '', attachment: body.id, caption: '', alt: '' } }] })
    const review = await firm.engineer.api.get(`/api/revisions/${draft}/submit-review`)
    expect(review.body).toMatchObject({ hash: null, findings: [{ lineId: 'fig', mustMend: true }] })
  })
})
