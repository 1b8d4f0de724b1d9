import { describe, expect, it } from 'vitest'
import type { SessionView } from '../../shared/types/api'
import type { DeviceView } from '../../shared/types/people'
import { Job, LoginAttempt, OneTimeLink, Session, User } from '../../server/database'
import { Client } from '../helpers/client'
import type { RefusalBody } from '../helpers/client'
import { createPerson, openSessionFor, PASSWORD, SESSION_COOKIE, signedIn, unique } from '../helpers/people'

const NEW_PASSWORD = 'three poles and a zero'

async function signIn(email: string, password = PASSWORD): Promise<{ client: Client, status: number, body: SessionView & RefusalBody }> {
  const client = new Client()
  const { status, body } = await client.post<SessionView & RefusalBody>('/api/auth/sign-in', { email, password })
  return { client, status, body }
}

/** The path that the last letter of this kind to `address` carries. */
async function linkSentTo(address: string, kind: string): Promise<string> {
  const jobs = await Job.findAll({ where: { kind: 'email' }, order: [['createdAt', 'DESC'], ['id', 'DESC']] })
  const letters = jobs.map(job => (typeof job.payload === 'string' ? JSON.parse(job.payload) : job.payload) as { kind: string, to: { address: string }, link: string })
  const letter = letters.find(one => one.kind === kind && one.to?.address === address)
  if (!letter) throw new Error(`No letter of kind ${kind} to ${address}`)
  return letter.link.split('/').pop()!
}

describe('signing in', () => {
  it('opens a session and says where the work list is', async () => {
    const person = await createPerson({ roles: ['checker', 'engineer'] })
    const { client, status, body } = await signIn(person.email.toUpperCase())
    expect(status).toBe(200)
    expect(body).toMatchObject({ home: '/queue', user: { id: person.id, email: person.email, roles: ['checker', 'engineer'], organisation: null } })
    expect((await client.get<SessionView>('/api/auth/session')).body.user.id).toBe(person.id)
  })

  it('refuses a wrong password and an unknown address in the same words', async () => {
    const person = await createPerson()
    const wrong = await signIn(person.email, 'not the password')
    const unknown = await signIn(`${unique('u')}@polewright.example`)
    expect(wrong.status).toBe(401)
    expect(unknown.status).toBe(401)
    expect(wrong.body.data).toEqual(unknown.body.data)
    expect(wrong.client.cookieHeader).toBe('')
  })

  it('refuses a disabled and an invited person', async () => {
    const disabled = await createPerson()
    await User.update({ disabledAt: new Date() }, { where: { id: disabled.id } })
    const invited = await createPerson({ invited: true })
    expect((await signIn(disabled.email)).status).toBe(401)
    expect((await signIn(invited.email)).status).toBe(401)
  })

  it('replaces a hash of weaker figures when it sees the password', async () => {
    const person = await createPerson()
    await signIn(person.email)
    const user = await User.findByPk(person.id)
    expect(user!.passwordHash).toMatch(/^\$scrypt\$n=131072,r=8,p=1\$/)
  })

  it('gives each device a session of its own and ends the former one of the same browser', async () => {
    const person = await createPerson()
    const { client } = await signIn(person.email)
    const [first] = await Session.findAll({ where: { userId: person.id } })
    await client.post('/api/auth/sign-in', { email: person.email, password: PASSWORD })
    const sessions = await Session.findAll({ where: { userId: person.id, revokedAt: null } })
    expect(sessions).toHaveLength(1)
    expect(sessions[0]!.id).not.toBe(first!.id)
  })

  it('makes whoever gets it wrong wait, but lets the owner in from elsewhere', async () => {
    const person = await createPerson()
    for (let i = 0; i < 5; i++) expect((await signIn(person.email, 'wrong wrong wrong')).status).toBe(401)
    const slowed = await signIn(person.email, 'wrong wrong wrong')
    expect(slowed.status).toBe(429)
    expect(slowed.body.data.help).toMatch(/Wait \d+ second/)
    // The same tries from another address do not count for this one.
    await LoginAttempt.update({ ip: '192.0.2.7' }, { where: { account: (await LoginAttempt.findOne({ order: [['id', 'DESC']] }))!.account } })
    expect((await signIn(person.email)).status).toBe(200)
  })

  it('gives no cookie to a visitor', async () => {
    const client = new Client()
    const { headers, body } = await client.get('/api/auth/session')
    expect(headers.getSetCookie()).toEqual([])
    expect(body).toBeNull()
  })

  it.each([
    [{ email: 'no address', password: 'x' }, 'email'],
    [{ email: 'a@b.example' }, 'password'],
    [{ email: 'a@b.example', password: 'x', more: 1 }, ''],
    [[], ''],
  ])('refuses %j at its field', async (input, field) => {
    const { status, body } = await new Client().post<RefusalBody>('/api/auth/sign-in', input)
    expect(status).toBe(400)
    expect(body.data).toMatchObject({ code: 'invalid_input', field })
    expect(body.data.help).toMatch(/\w/)
  })

  it('takes JSON only, well-formed, not too large', async () => {
    const client = new Client()
    const form = await client.raw('POST', '/api/auth/sign-in', undefined, { headers: { 'content-type': 'text/plain', 'content-length': '0' } })
    expect(form.status).toBe(415)
    const broken = await fetch(`${client.baseUrl}/api/auth/sign-in`, { method: 'POST', headers: { 'origin': client.baseUrl, 'content-type': 'application/json' }, body: '{"email":' })
    expect(broken.status).toBe(400)
    expect((await broken.json() as RefusalBody).data.code).toBe('malformed_json')
    const huge = await client.post<RefusalBody>('/api/auth/sign-in', { email: 'a@b.example', password: 'x'.repeat(1_100_000) })
    expect(huge.status).toBe(413)
  })
})

describe('a session', () => {
  it('ends with signing out, also for a copy of the cookie', async () => {
    const client = await signedIn(await createPerson())
    const copy = new Client()
    copy.setCookie(SESSION_COOKIE, client.cookieHeader.split('=').slice(1).join('='))
    expect((await copy.get('/api/auth/sessions')).status).toBe(200)
    expect((await client.post('/api/auth/sign-out')).status).toBe(204)
    expect((await copy.get('/api/auth/sessions')).status).toBe(401)
  })

  it('is over after its time, and when it has not been used for long', async () => {
    const person = await createPerson()
    const old = await signedIn(person)
    await Session.update({ expiresAt: new Date(Date.now() - 1000) }, { where: { id: old.sessionId } })
    expect((await old.get('/api/auth/sessions')).status).toBe(401)
    const idle = await signedIn(person)
    await Session.update({ lastSeenAt: new Date(Date.now() - 13 * 60 * 60 * 1000) }, { where: { id: idle.sessionId } })
    expect((await idle.get('/api/auth/sessions')).status).toBe(401)
  })

  it('stays open while it is used', async () => {
    const client = await signedIn(await createPerson())
    await Session.update({ lastSeenAt: new Date(Date.now() - 60 * 60 * 1000) }, { where: { id: client.sessionId } })
    await client.get('/api/auth/sessions')
    const row = await Session.findByPk(client.sessionId)
    expect(Date.now() - row!.lastSeenAt.getTime()).toBeLessThan(60_000)
  })

  it('is not made from a forged or mangled cookie', async () => {
    const client = new Client()
    const { cookie } = await openSessionFor(await createPerson())
    client.setCookie(SESSION_COOKIE, `${cookie.slice(0, -4)}AAAA`)
    expect((await client.get('/api/auth/sessions')).status).toBe(401)
    const other = new Client()
    expect((await other.get('/api/auth/sessions', { headers: { 'x-nuxt-session-session': cookie, [`x-${SESSION_COOKIE}-session`]: cookie } })).status).toBe(401)
  })

  it('is listed with the others and can be ended from another device', async () => {
    const person = await createPerson()
    const here = await signedIn(person)
    const there = await signedIn(person)
    const { body } = await here.get<DeviceView[]>('/api/auth/sessions')
    expect(body.map(device => [device.id, device.current]).sort()).toEqual([[here.sessionId, true], [there.sessionId, false]].sort())
    expect((await here.delete(`/api/auth/sessions/${there.sessionId}`)).status).toBe(204)
    expect((await there.get('/api/auth/sessions')).status).toBe(401)
    expect((await here.get('/api/auth/sessions')).status).toBe(200)
  })

  it('of another person cannot be ended', async () => {
    const mine = await signedIn(await createPerson())
    const theirs = await signedIn(await createPerson())
    expect((await mine.delete(`/api/auth/sessions/${theirs.sessionId}`)).status).toBe(404)
    expect((await theirs.get('/api/auth/sessions')).status).toBe(200)
  })
})

describe('where a request comes from', () => {
  it.each([
    ['another site', { origin: 'https://elsewhere.example' }],
    ['another site, by the browser\'s word', { 'sec-fetch-site': 'cross-site' }],
    ['a neighbour under the same domain', { 'sec-fetch-site': 'same-site' }],
    ['an opaque origin', { origin: 'null' }],
  ])('%s may change nothing', async (_, headers) => {
    const client = await signedIn(await createPerson())
    const { status, body } = await client.post<RefusalBody>('/api/auth/sign-out', undefined, { headers })
    expect(status).toBe(403)
    expect(body.data.code).toBe('foreign_origin')
    expect((await client.get('/api/auth/sessions')).status).toBe(200)
  })

  it('is needed', async () => {
    const client = await signedIn(await createPerson())
    const response = await fetch(`${client.baseUrl}/api/auth/sign-out`, { method: 'POST', headers: { cookie: client.cookieHeader } })
    expect(response.status).toBe(403)
  })
})

describe('a password', () => {
  it('is changed with the present one, and signs the other devices out', async () => {
    const person = await createPerson()
    const here = await signedIn(person)
    const there = await signedIn(person)
    expect((await here.post('/api/auth/password', { current: PASSWORD, next: NEW_PASSWORD })).status).toBe(204)
    expect((await here.get('/api/auth/sessions')).status).toBe(200)
    expect((await there.get('/api/auth/sessions')).status).toBe(401)
    expect((await signIn(person.email, NEW_PASSWORD)).status).toBe(200)
    expect((await signIn(person.email)).status).toBe(401)
  })

  it('is not changed without it', async () => {
    const person = await createPerson()
    const client = await signedIn(person)
    const { status, body } = await client.post<RefusalBody>('/api/auth/password', { current: 'something else', next: NEW_PASSWORD })
    expect(status).toBe(403)
    expect(body.data).toMatchObject({ code: 'wrong_password', field: 'current' })
  })

  it.each(['short', 'aaaaaaaaaaaaaaa', 'password123456789', '1234567890123'])('%s is refused with a reason', async (next) => {
    const client = await signedIn(await createPerson())
    const { status, body } = await client.post<RefusalBody>('/api/auth/password', { current: PASSWORD, next })
    expect(status).toBe(400)
    expect(body.data.field).toBe('next')
  })

  it('can be chosen anew by a link, which works once', async () => {
    const person = await createPerson()
    const before = await signedIn(person)
    const client = new Client()
    expect((await client.post('/api/auth/reset-request', { email: person.email })).status).toBe(202)
    await expect.poll(() => OneTimeLink.count({ where: { userId: person.id } })).toBe(1)
    const token = await linkSentTo(person.email, 'password_reset')
    expect((await client.get(`/api/auth/reset?token=${token}`)).body).toEqual({ name: person.name, email: person.email })
    expect((await client.post('/api/auth/reset', { token, password: NEW_PASSWORD })).status).toBe(200)
    expect((await before.get('/api/auth/sessions')).status).toBe(401)
    expect((await client.get('/api/auth/sessions')).status).toBe(200)
    const again = await new Client().post<RefusalBody>('/api/auth/reset', { token, password: 'another good password' })
    expect(again.status).toBe(404)
    expect(again.body.data.code).toBe('link_not_valid')
  })

  it('has no link that is found in the database', async () => {
    const person = await createPerson()
    await new Client().post('/api/auth/reset-request', { email: person.email })
    await expect.poll(() => OneTimeLink.count({ where: { userId: person.id } })).toBe(1)
    const token = await linkSentTo(person.email, 'password_reset')
    const link = await OneTimeLink.findOne({ where: { userId: person.id } })
    expect(link!.tokenHash).toMatch(/^[0-9a-f]{64}$/)
    expect(JSON.stringify(link)).not.toContain(token)
  })

  it('is asked for an unknown address with the same answer', async () => {
    const known = await new Client().post('/api/auth/reset-request', { email: (await createPerson()).email })
    const unknown = await new Client().post('/api/auth/reset-request', { email: `${unique('u')}@polewright.example` })
    expect(unknown.status).toBe(known.status)
    expect(unknown.body).toEqual(known.body)
  })
})

describe('errors', () => {
  it('of unknown addresses have the one shape', async () => {
    const { status, body } = await new Client().get<RefusalBody>('/api/nothing/here')
    expect(status).toBe(404)
    expect(body).toMatchObject({ statusCode: 404, data: { code: 'not_found' } })
  })
})
