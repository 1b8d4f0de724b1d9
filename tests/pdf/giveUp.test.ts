import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { OutboxMessage } from '../../shared/types/outbox'
import { useBase } from '../helpers/base'
import { launch } from '../helpers/launch'
import { inputFilter } from './support/document'
import { bringToIssue, newSheet, openOffice, reached } from './support/office'

/** A server of its own whose browser cannot start. */
describe('an issue whose PDF cannot be made', () => {
  let stop: () => Promise<void>
  const chromium = process.env.CHROMIUM_PATH
  beforeAll(async () => {
    process.env.CHROMIUM_PATH = '/nonexistent/chromium'
    const server = await launch('giveup')
    useBase(server.base)
    stop = server.stop
  }, 120_000)
  afterAll(async () => {
    if (chromium === undefined) delete process.env.CHROMIUM_PATH
    else process.env.CHROMIUM_PATH = chromium
    await stop()
  })

  it('is checked again after the last attempt, the approval void, the approver told, the client not', async () => {
    const office = await openOffice()
    const id = await newSheet(office, inputFilter())
    await bringToIssue(office, id)
    await reached(office, id, 'issuing')
    const after = await reached(office, id, 'checked')

    expect(after).toMatchObject({ code: null, pdfHash: null, approvedBy: null, purpose: null })
    expect(after.signatures.filter(one => !one.void).map(one => one.meaning)).toEqual(['prepared', 'checked'])
    const approval = after.signatures.find(one => one.meaning === 'approved')
    expect(approval?.voidReason).toContain('could not be made')
    expect((await office.client.get(`/api/revisions/${id}`)).status).toBe(404)

    const toApprover = async () => {
      const { body } = await office.manager.get<OutboxMessage[]>('/api/outbox')
      return body.filter(message => message.subject.startsWith('Not issued')).map(message => message.to.map(one => one.address))
    }
    await expect.poll(toApprover, { timeout: 30_000, interval: 250 }).toEqual([[office.people.manager.email]])
    const { body } = await office.manager.get<OutboxMessage[]>('/api/outbox')
    expect(body.flatMap(message => message.to).map(one => one.address)).not.toContain(office.people.client.email)
  })
})
