import { createHash } from 'node:crypto'
import { beforeAll, describe, expect, it } from 'vitest'
import type { OutboxMessage } from '../../shared/types/outbox'
import type { RevisionView, VerificationView } from '../../shared/types/api'
import { Client } from '../helpers/client'
import { createClientPerson, signedIn } from '../helpers/people'
import { inputFilter } from './support/document'
import { approve, bringToIssue, newSheet, openOffice, reached, sign, submit, write } from './support/office'
import type { Office } from './support/office'
import { pdfFacts } from './support/poppler'
import type { PdfFacts } from './support/poppler'

const sha256 = (text: string | Buffer) => createHash('sha256').update(text).digest('hex')

async function download(client: Client, id: string): Promise<Buffer> {
  const response = await client.raw('GET', `/api/revisions/${id}/pdf`)
  expect(response.status).toBe(200)
  return Buffer.from(await response.arrayBuffer())
}

describe('an issued sheet', () => {
  let office: Office
  let id: string
  let issued: RevisionView
  let file: Buffer
  let facts: PdfFacts

  beforeAll(async () => {
    office = await openOffice()
    id = await newSheet(office, inputFilter())
    await bringToIssue(office, id)
    issued = await reached(office, id, 'issued')
    file = await download(office.client, id)
    facts = pdfFacts(file)
  }, 120_000)

  it('has the title block and its number on every page', () => {
    expect(facts.pages.length).toBeGreaterThan(1)
    facts.pages.forEach((page, at) => {
      expect(page).toContain(`Page ${at + 1} of ${facts.pages.length}`)
      expect(page).toContain(issued.number)
      expect(page).toContain('Auxiliary supply, input filter')
      expect(page).toContain(office.people.checker.name.split(' ').at(-1))
      expect(page).toMatch(/Uncontrolled when printed; verify at http\S+\/verify\//)
    })
  })

  it('shows lines, results, verdicts, cautions, signatures and the stamp', () => {
    const text = facts.pages.join('\n')
    expect(text).toMatch(/ISSUED|Issued/)
    expect(text).toMatch(/for construction/i)
    expect(text).toContain('not a licensed engineer’s seal')
    expect(text).toContain('L_1 = 4.7 uH ± 20 %')
    expect(text).toMatch(/23\.2\d* kHz/)
    expect(text).toContain('Req 1 met')
    expect(text).toContain('does not replace local codes')
    expect(text).toContain('Revisions issued')
    for (const person of [office.people.engineer, office.people.checker, office.people.manager]) expect(text).toContain(person.name)
    expect(text).toContain(issued.submissionHash)
    expect(text).toContain(issued.code)
  })

  it('embeds all fonts and draws its plots as vectors', () => {
    expect(facts.fonts.length).toBeGreaterThan(4)
    expect(facts.fonts.filter(font => !font.embedded)).toEqual([])
    expect(facts.fonts.some(font => font.name.includes('KaTeX'))).toBe(true)
    expect(facts.fonts.some(font => font.name.includes('Barlow'))).toBe(true)
    expect(facts.images).toBe(0)
  })

  it('carries the source and the results that were signed', () => {
    expect(sha256(facts.attached['sheet-source.json']!)).toBe(issued.submissionHash)
    expect(JSON.parse(facts.attached['sheet-results.json']!)).toBeTruthy()
    expect(facts.info).toContain(`${issued.number} revision ${issued.revision}`)
  })

  it('is sealed as a whole', () => {
    expect(facts.seal).toContain('Signature is Valid')
    expect(facts.seal).toContain('Total document signed')
  })

  it('is the same file for everyone, every time', async () => {
    expect(sha256(file)).toBe(issued.pdfHash)
    for (const client of [office.client, office.engineer, office.manager]) expect(sha256(await download(client, id))).toBe(issued.pdfHash)
  })

  it('is found by its code without an account, however the code is typed', async () => {
    const visitor = new Client()
    const { body } = await visitor.get<VerificationView>(`/api/verify/${issued.code}`)
    expect(body).toMatchObject({
      genuine: true, code: issued.code, contentHash: issued.submissionHash, pdfHash: sha256(file), supersededBy: null,
      sheet: { number: issued.number, revision: issued.revision, state: 'issued', purpose: 'construction' },
    })
    expect(body.signatures?.map(one => one.meaning)).toEqual(['prepared', 'checked', 'approved'])
    const typed = encodeURIComponent(issued.code!.toLowerCase().replaceAll('-', ' '))
    expect((await visitor.get(`/api/verify/${typed}`)).body).toEqual(body)
  })

  it('is told to the client once, and to nobody else', async () => {
    const { body } = await office.manager.get<OutboxMessage[]>('/api/outbox')
    const letters = body.filter(message => message.text.includes(issued.code!))
    expect(letters.map(letter => letter.to.map(one => one.address))).toEqual([[office.people.client.email]])
    expect(letters[0]).toMatchObject({ times: 1, subject: `Issued for construction: ${issued.number} revision ${issued.revision}` })
    expect((await office.manager.get(`/api/revisions/${id}/recipients`)).body).toMatchObject([{ email: office.people.client.email, organisation: office.organisation.name }])
  })

  it('is hidden from other clients and from who is not signed in', async () => {
    const stranger = await signedIn(await createClientPerson())
    expect((await stranger.get(`/api/revisions/${id}/pdf`)).status).toBe(404)
    expect((await stranger.get(`/api/revisions/${id}/recipients`)).status).toBe(404)
    expect((await new Client().get(`/api/revisions/${id}/pdf`)).status).toBe(401)
    expect((await office.client.get(`/api/revisions/${id}/recipients`)).status).toBe(403)
    expect((await office.client.get('/api/outbox')).status).toBe(403)
  })

  it('becomes superseded when the next revision is issued, which marks what changed', async () => {
    const { body } = await office.engineer.post<{ revisionId: string }>(`/api/revisions/${id}/revise`, { reason: 'The load was corrected.' })
    await write(office, body.revisionId, inputFilter(4))
    await submit(office, body.revisionId)
    await sign(office, body.revisionId)
    await approve(office, body.revisionId, 'as_built')
    const next = await reached(office, body.revisionId, 'issued')
    expect((await new Client().get<VerificationView>(`/api/verify/${issued.code}`)).body).toMatchObject({
      genuine: true, pdfHash: issued.pdfHash, sheet: { state: 'superseded' }, supersededBy: { revision: next.revision },
    })
    const text = pdfFacts(await download(office.client, next.id)).pages.join('\n')
    expect(text).toContain('The load was corrected.')
    expect(text).toContain('marks a line that differs from the revision issued before')
    expect(sha256(await download(office.client, id))).toBe(issued.pdfHash)
  }, 120_000)
})

describe('verification', () => {
  it('answers an unknown code in the same shape', async () => {
    const { status, body } = await new Client().get('/api/verify/2222-3333-4444-5555-6666-7777')
    expect({ status, body }).toEqual({ status: 200, body: { genuine: false, code: '2222-3333-4444-5555-6666-7777' } })
  })

  it('finds no sheet of its own accord: a token is needed to print', async () => {
    expect((await new Client().get(`/api/print/${'A'.repeat(43)}`)).status).toBe(404)
    expect((await new Client().raw('GET', `/print/${'A'.repeat(43)}`)).status).toBe(404)
  })
})
