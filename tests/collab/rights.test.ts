import { afterEach, describe, expect, it, vi } from 'vitest'
import * as Y from 'yjs'
import { Project, ProjectMember, Revision, RevisionDoc, RevisionUpdate, Session, User, UserRole } from '../../server/database'
import { CLOSE } from '../../shared/collab/messages'
import { createClientOrganisation, createClientPerson, createPerson, openSessionFor, SESSION_COOKIE, signedIn } from '../helpers/people'
import { createDraft, freeze, storedDocument } from './support/drafts'
import { EMPTY_UPDATE, answer, closeRaw, openRaw, openReady, question, update } from './support/raw'
import { closePages, openPage } from './support/sheet'

afterEach(() => {
  closePages()
  closeRaw()
})

describe('the upgrade', () => {
  it.each([
    ['another site', { origin: 'https://elsewhere.example' }],
    ['no site at all', { origin: null }],
    ['a path that is none', { path: '/collaboration/nowhere' }],
    ['a path with more behind it', { path: '/collaboration/01ARZ3NDEKTSV4RRFFQ69G5FAV/more' }],
  ])('is refused to %s', async (_what, options) => {
    const draft = await createDraft(1)
    const raw = await openRaw(draft.author, draft, options)
    const heard = await raw.watch.wait(({ failed }) => failed !== null, 'refused')
    expect(heard.failed).toMatch(/40[34]/)
  })

  it('is answered to a plain request in words', async () => {
    const draft = await createDraft(1)
    const client = await signedIn(draft.author)
    const { status, body } = await client.get<{ data: { code: string } }>(`/collaboration/${draft.revisionId}`)
    expect(status).toBe(426)
    expect(body.data.code).toBe('socket_only')
  })
})

describe('a socket is closed at once', () => {
  it('without a session, with a broken one, and with one that was ended', async () => {
    const draft = await createDraft(1)
    const ended = await openSessionFor(draft.author)
    await Session.update({ revokedAt: new Date() }, { where: { id: ended.id } })
    for (const cookie of [null, `${SESSION_COOKIE}=nonsense`, `${SESSION_COOKIE}=${ended.cookie}`]) {
      const raw = await openRaw(null, draft, { cookie })
      expect((await raw.closedWith(CLOSE.signedOut)).answers).toHaveLength(0)
    }
  })

  it('to strangers, to clients and for sheets that are not, all alike', async () => {
    const draft = await createDraft(1)
    const organisation = await createClientOrganisation()
    await Project.update({ clientId: organisation.id }, { where: { id: draft.projectId } })
    for (const person of [await createPerson(), await createClientPerson(organisation.id), await createClientPerson()]) {
      const raw = await openRaw(person, draft)
      await raw.closedWith(CLOSE.notFound)
      const notices = await openRaw(person, draft, { query: '' })
      await notices.closedWith(CLOSE.notFound)
    }
    const nowhere = await openRaw(draft.author, { revisionId: '01ARZ3NDEKTSV4RRFFQ69G5FAV', epoch: 1 })
    expect((await nowhere.closedWith(CLOSE.notFound)).refused).toEqual([])
  })

  it('for an epoch that is not now, and for a page older than the server', async () => {
    const draft = await createDraft(1)
    await (await openRaw(draft.author, { ...draft, epoch: 2 })).closedWith(CLOSE.frozen)
    await (await openRaw(draft.author, draft, { query: '?epoch=1&format=99' })).closedWith(CLOSE.outdated)
    await (await openRaw(draft.author, draft, { query: '?epoch=1' })).closedWith(CLOSE.outdated)
    await freeze(draft.revisionId)
    await (await openRaw(draft.author, { ...draft, epoch: 2 })).closedWith(CLOSE.frozen)
  })
})

describe('who may only read', () => {
  it('gets the document, and writing is refused in words, not ignored', async () => {
    const draft = await createDraft(1)
    const manager = await createPerson({ roles: ['manager'] })
    const page = await openPage(manager, draft)
    await page.saved()
    expect(page.plain()).toContain('R = 47 ohm')
    page.write('not mine to write')
    const facts = await page.facts.wait(({ refused }) => refused !== null, 'refused')
    expect(facts.refused?.code).toBe('read_only')
    expect(page.state()).toMatchObject({ kind: 'refused' })
    expect((await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()).not.toContain('not mine')
    expect(await RevisionUpdate.count({ where: { revisionId: draft.revisionId } })).toBe(1)
  })

  it('is refused a deletion too, though it brings nothing new', async () => {
    const draft = await createDraft(1)
    const { raw, doc } = await openReady(await createPerson({ roles: ['manager'] }), draft)
    let deletion: Uint8Array = EMPTY_UPDATE
    doc.on('update', bytes => deletion = bytes)
    doc.getXmlFragment('sheet').delete(0, 1)
    raw.send(update(deletion))
    await raw.refusedWith('read_only')
    raw.send(answer(Y.encodeStateAsUpdate(doc)))
    await raw.watch.wait(({ refused }) => refused.length === 2, 'refused again')
    expect(await RevisionUpdate.count({ where: { revisionId: draft.revisionId } })).toBe(1)
  })
})

describe('a right that ends closes the socket', () => {
  it('when the person signs out', async () => {
    const draft = await createDraft(1)
    const client = await signedIn(draft.author)
    const page = await openPage(draft.author, draft, { cookie: client.cookieHeader })
    await page.saved()
    expect((await client.post('/api/auth/sign-out')).status).toBeLessThan(300)
    expect((await page.facts.wait(({ closed }) => closed !== null, 'closed')).closed).toBe(CLOSE.signedOut)
    expect(page.state().kind).toBe('signed_out')
  })

  it.each([
    ['the session is ended by another process', CLOSE.signedOut, (draft, sessionId) => Session.update({ revokedAt: new Date() }, { where: { id: sessionId } })],
    ['the session runs out', CLOSE.signedOut, (draft, sessionId) => Session.update({ expiresAt: new Date(0) }, { where: { id: sessionId } })],
    ['the person is disabled', CLOSE.signedOut, draft => User.update({ disabledAt: new Date() }, { where: { id: draft.author.id } })],
    ['the person leaves the project', CLOSE.noRight, draft => ProjectMember.destroy({ where: { userId: draft.author.id } })],
    ['the person loses every role', CLOSE.noRight, draft => UserRole.destroy({ where: { userId: draft.author.id } })],
    ['the project is archived', CLOSE.noRight, draft => Project.update({ archivedAt: new Date() }, { where: { id: draft.projectId } })],
    ['the revision is frozen by another process', CLOSE.frozen, draft => freeze(draft.revisionId)],
  ] as [string, number, (draft: Awaited<ReturnType<typeof createDraft>>, sessionId: string) => Promise<unknown>][])('when %s', async (_what, code, happen) => {
    const draft = await createDraft(1)
    const client = await signedIn(draft.author)
    const page = await openPage(draft.author, draft, { cookie: client.cookieHeader })
    await page.saved()
    await happen(draft, client.sessionId)
    expect((await page.facts.wait(({ closed }) => closed !== null, 'closed')).closed).toBe(code)
    page.write('too late')
    expect((await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()).not.toContain('too late')
  })
})

describe('whoever only waits for news', () => {
  it('is told when the revision changes in another process, and gets no document', async () => {
    const draft = await createDraft(2)
    await freeze(draft.revisionId)
    const page = await openPage(draft.members[1]!, draft)
    await page.facts.wait(({ closed }) => closed === CLOSE.frozen, 'frozen')
    const raw = await openRaw(draft.members[1]!, draft, { query: '' })
    await raw.watch.wait(() => raw.socket.readyState === raw.socket.OPEN, 'open')
    // Which change is the first that it can tell depends on when the server looked first, so the other process makes several.
    await vi.waitFor(async () => {
      await Revision.increment('version', { where: { id: draft.revisionId } })
      expect(raw.heard.changed).toContain('state')
    }, { timeout: 20_000, interval: 200 })
    raw.send(question())
    await raw.closedWith(CLOSE.malformed)
    expect(raw.heard.answers).toHaveLength(0)
  })
})

it('a session in which somebody writes is in use', async () => {
  const draft = await createDraft(1)
  const client = await signedIn(draft.author)
  const page = await openPage(draft.author, draft, { cookie: client.cookieHeader })
  await page.saved()
  const before = new Date(Date.now() - 10 * 60 * 1000)
  await Session.update({ lastSeenAt: before }, { where: { id: client.sessionId } })
  page.write('still here')
  await page.saved()
  await vi.waitFor(async () => {
    expect((await Session.findByPk(client.sessionId))!.lastSeenAt.getTime()).toBeGreaterThan(before.getTime())
  }, { timeout: 20_000, interval: 100 })
  expect((await RevisionDoc.findByPk(draft.revisionId))!.nextSeq).toBe(3)
})
