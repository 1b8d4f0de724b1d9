import { describe, expect, it } from 'vitest'
import type { SessionView } from '../../shared/types/api'
import type { OrganisationView, PersonView } from '../../shared/types/people'
import { Job, User, UserRole } from '../../server/database'
import { Client } from '../helpers/client'
import type { RefusalBody } from '../helpers/client'
import { createClientOrganisation, createClientPerson, createPerson, signedIn, unique } from '../helpers/people'

const PASSWORD = 'three poles and a zero'

const manager = async () => signedIn(await createPerson({ roles: ['manager'] }))

async function invitationOf(email: string): Promise<string> {
  const jobs = await Job.findAll({ where: { kind: 'email' }, order: [['createdAt', 'DESC'], ['id', 'DESC']] })
  for (const job of jobs) {
    const letter = (typeof job.payload === 'string' ? JSON.parse(job.payload) : job.payload) as { kind: string, to: { address: string }, link: string }
    if (letter.kind === 'invitation' && letter.to.address === email) return letter.link.split('/').pop()!
  }
  throw new Error(`No invitation to ${email}`)
}

const someone = () => ({ email: `${unique('n')}@polewright.example`, name: 'Sofia Brandt', initials: 'SB', roles: ['engineer', 'checker'] })

describe('inviting', () => {
  it('makes an account that its owner opens with the link from the e-mail', async () => {
    const boss = await manager()
    const input = someone()
    const { status, body } = await boss.post<PersonView>('/api/people', input)
    expect(status).toBe(201)
    expect(body).toMatchObject({ ...input, state: 'invited', organisation: null })

    const token = await invitationOf(input.email)
    const visitor = new Client()
    expect((await visitor.get(`/api/auth/invitation?token=${token}`)).body).toEqual({ name: input.name, email: input.email })
    const accepted = await visitor.post<SessionView>('/api/auth/accept-invitation', { token, name: 'Sofia Brandt-Lie', password: PASSWORD })
    expect(accepted.status).toBe(200)
    expect(accepted.body).toMatchObject({ home: '/work', user: { name: 'Sofia Brandt-Lie', roles: ['engineer', 'checker'] } })
    expect((await visitor.get('/api/auth/sessions')).status).toBe(200)
    expect((await new Client().post('/api/auth/accept-invitation', { token, password: PASSWORD })).status).toBe(404)
  })

  it('again makes the earlier link useless', async () => {
    const boss = await manager()
    const input = someone()
    const { body: { id } } = await boss.post<PersonView>('/api/people', input)
    const first = await invitationOf(input.email)
    expect((await boss.post(`/api/people/${id}/invite`)).status).toBe(204)
    const second = await invitationOf(input.email)
    expect(second).not.toBe(first)
    expect((await new Client().get(`/api/auth/invitation?token=${first}`)).status).toBe(404)
    expect((await new Client().get(`/api/auth/invitation?token=${second}`)).status).toBe(200)
  })

  it('spends the link once when it is used twice at the same moment', async () => {
    const boss = await manager()
    const input = someone()
    await boss.post('/api/people', input)
    const token = await invitationOf(input.email)
    const tries = await Promise.all([1, 2].map(() => new Client().post('/api/auth/accept-invitation', { token, password: PASSWORD })))
    expect(tries.map(one => one.status).sort()).toEqual([200, 404])
  })

  it('refuses an address that is taken, also in other letters and at the same moment', async () => {
    const boss = await manager()
    const input = someone()
    const tries = await Promise.all([1, 2].map(() => boss.post<RefusalBody>('/api/people', input)))
    expect(tries.map(one => one.status).sort()).toEqual([201, 400])
    const shouted = await boss.post<RefusalBody>('/api/people', { ...input, email: input.email.toUpperCase() })
    expect(shouted.body.data).toMatchObject({ code: 'email_taken', field: 'email' })
  })

  it.each([
    [{ roles: [] }, 'roles'],
    [{ roles: ['engineer', 'engineer'] }, 'roles'],
    [{ roles: ['client', 'engineer'] }, 'roles'],
    [{ roles: ['client'] }, 'organisationId'],
    [{ roles: ['owner'] }, 'roles.0'],
    [{ name: '' }, 'name'],
    [{ name: 'A\r\nBcc: x@y.example' }, 'name'],
    [{ initials: '12' }, 'initials'],
    [{ email: 'x' }, 'email'],
    [{ organisationId: '00000000000000000000000000' }, 'organisationId'],
  ])('refuses %j at %s', async (part, field) => {
    const { status, body } = await (await manager()).post<RefusalBody>('/api/people', { ...someone(), ...part })
    expect(status).toBe(400)
    expect(body.data.field).toBe(field)
  })

  it('a client\'s person names the client, who must exist', async () => {
    const boss = await manager()
    const { id, name } = await createClientOrganisation()
    const { status, body } = await boss.post<PersonView>('/api/people', { ...someone(), roles: ['client'], organisationId: id })
    expect(status).toBe(201)
    expect(body.organisation).toEqual({ id, name })
    const nobody = await boss.post<RefusalBody>('/api/people', { ...someone(), roles: ['client'], organisationId: '00000000000000000000000000' })
    expect(nobody.body.data.field).toBe('organisationId')
  })
})

describe('keeping people', () => {
  it('is for managers', async () => {
    const engineer = await signedIn(await createPerson({ roles: ['engineer', 'checker'] }))
    const client = await signedIn(await createClientPerson())
    for (const other of [engineer, client]) {
      expect((await other.get('/api/people')).status).toBe(403)
      expect((await other.post('/api/people', someone())).status).toBe(403)
      expect((await other.get('/api/organisations')).status).toBe(403)
    }
    expect((await new Client().get('/api/people')).status).toBe(401)
  })

  it('changes name and roles, which count at the next request', async () => {
    const boss = await manager()
    const person = await createPerson({ roles: ['engineer'] })
    const their = await signedIn(person)
    expect((await their.get('/api/people')).status).toBe(403)
    const { body } = await boss.patch<PersonView>(`/api/people/${person.id}`, { name: 'Arne Holt', initials: 'AH', roles: ['manager', 'engineer'] })
    expect(body).toMatchObject({ name: 'Arne Holt', initials: 'AH', roles: ['manager', 'engineer'] })
    expect((await their.get('/api/people')).status).toBe(200)
  })

  it('disables at once, and enables again', async () => {
    const boss = await manager()
    const person = await createPerson()
    const their = await signedIn(person)
    expect((await boss.patch<PersonView>(`/api/people/${person.id}`, { disabled: true })).body.state).toBe('disabled')
    expect((await their.get('/api/auth/sessions')).status).toBe(401)
    expect((await boss.patch<PersonView>(`/api/people/${person.id}`, { disabled: false })).body.state).toBe('active')
    expect((await their.get('/api/auth/sessions')).status).toBe(401)
    expect((await (await signedIn(person)).get('/api/auth/sessions')).status).toBe(200)
  })

  it('does not let a manager disable their own account', async () => {
    const person = await createPerson({ roles: ['manager'] })
    const { status, body } = await (await signedIn(person)).patch<RefusalBody>(`/api/people/${person.id}`, { disabled: true })
    expect(status).toBe(409)
    expect(body.data.code).toBe('own_account')
  })

  it('keeps at least one manager', async () => {
    const last = await createPerson({ roles: ['manager'] })
    const client = await signedIn(last)
    // Everyone else who is a manager in this database steps back for the moment of this test.
    const others = (await UserRole.findAll({ where: { role: 'manager' } })).map(row => row.userId).filter(id => id !== last.id)
    await User.update({ disabledAt: new Date() }, { where: { id: others } })
    try {
      const { status, body } = await client.patch<RefusalBody>(`/api/people/${last.id}`, { roles: ['engineer'] })
      expect(status).toBe(409)
      expect(body.data.code).toBe('last_manager')
    }
    finally {
      await User.update({ disabledAt: null }, { where: { id: others } })
    }
  })

  it('never turns a client\'s person into one of the firm', async () => {
    const boss = await manager()
    const outsider = await createClientPerson()
    const { status, body } = await boss.patch<RefusalBody>(`/api/people/${outsider.id}`, { roles: ['engineer'] })
    expect(status).toBe(400)
    expect(body.data.field).toBe('roles')
  })

  it('does not find people who are not there', async () => {
    const boss = await manager()
    expect((await boss.patch('/api/people/00000000000000000000000000', { name: 'No One' })).status).toBe(404)
    expect((await boss.patch('/api/people/../secrets', { name: 'No One' })).status).toBe(404)
    expect((await boss.post('/api/people/00000000000000000000000000/invite')).status).toBe(404)
  })
})

describe('the first manager', () => {
  it('is made by whoever runs the server, while nobody can sign in as one', async () => {
    const { inviteFirstManager } = await import('../../server/commands/people/firstManager')
    const address = `${unique('m')}@polewright.example`
    const managers = (await UserRole.findAll({ where: { role: 'manager' } })).map(row => row.userId)
    await User.update({ disabledAt: new Date() }, { where: { id: managers } })
    try {
      const first = await inviteFirstManager(address, 'Ruth Osei')
      const path = await inviteFirstManager(address, 'Ruth Osei')
      const [visitor, token] = [new Client(), path.split('/').pop()]
      expect((await visitor.get(`/api/auth/invitation?token=${first.split('/').pop()}`)).status).toBe(404)
      expect((await visitor.post<SessionView>('/api/auth/accept-invitation', { token, password: PASSWORD })).body).toMatchObject({ home: '/board' })
      await expect(inviteFirstManager(`${unique('m')}@polewright.example`, 'Someone Else')).rejects.toMatchObject({ data: { code: 'has_manager' } })
    }
    finally {
      await User.update({ disabledAt: null }, { where: { id: managers } })
    }
  })

  it('has a proper address', async () => {
    const { inviteFirstManager } = await import('../../server/commands/people/firstManager')
    await expect(inviteFirstManager('no address', 'Ruth Osei')).rejects.toMatchObject({ data: { field: 'email' } })
  })
})

describe('clients', () => {
  it('are created, renamed and listed with their people', async () => {
    const boss = await manager()
    const name = `Norrsund ${unique()}`
    const { status, body: { id } } = await boss.post<OrganisationView>('/api/organisations', { name: `  ${name} ` })
    expect(status).toBe(201)
    await createClientPerson(id)
    const renamed = await boss.patch<OrganisationView>(`/api/organisations/${id}`, { name: `${name} AS` })
    expect(renamed.body).toMatchObject({ id, name: `${name} AS`, people: 1, projects: 0 })
    const listed = (await boss.get<OrganisationView[]>('/api/organisations')).body
    expect(listed.find(one => one.id === id)?.name).toBe(`${name} AS`)
  })

  it('have names of their own', async () => {
    const boss = await manager()
    const { name } = await createClientOrganisation()
    const { status, body } = await boss.post<RefusalBody>('/api/organisations', { name: name.toUpperCase() })
    expect(status).toBe(400)
    expect(body.data).toMatchObject({ code: 'name_taken', field: 'name' })
  })
})
