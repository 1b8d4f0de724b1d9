import { once } from 'node:events'
import type { AddressInfo } from 'node:net'
import type { Readable } from 'node:stream'
import { simpleParser } from 'mailparser'
import type { ParsedMail } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { TestBase } from '../helpers/base'
import { useBase } from '../helpers/base'
import { launch } from '../helpers/launch'
import { startOwnServer } from '../helpers/server'
import { inputFilter } from './support/document'
import { newSheet, openOffice, submit } from './support/office'
import type { Office } from './support/office'

type Gate = 'accept' | 'hold before' | 'hold after'

/** A mail server that can keep the sender waiting before or after it has taken a message. */
class Post {
  readonly taken: ParsedMail[] = []
  gate: Gate = 'accept'
  private readonly server = new SMTPServer({
    authOptional: true, disabledCommands: ['AUTH', 'STARTTLS'], logger: false,
    onRcptTo: (_address, _session, done) => {
      if (this.gate === 'hold before') this.server.emit('held')
      else done()
    },
    onData: (stream: Readable, _session, done) => {
      void simpleParser(stream).then((mail) => {
        this.taken.push(mail)
        if (this.gate === 'hold after') this.server.emit('held')
        else done()
      })
    },
  })

  async open(): Promise<string> {
    this.server.on('error', () => {})
    await new Promise<void>((resolve) => { this.server.listen(0, '127.0.0.1', resolve) })
    return `smtp://127.0.0.1:${(this.server.server.address() as AddressInfo).port}`
  }

  held(): Promise<unknown> { return once(this.server, 'held') }
  close(): Promise<void> { return new Promise(resolve => this.server.close(() => resolve())) }
}

describe('a server that is killed while a letter is on its way', () => {
  const post = new Post()
  let url: string
  let base: TestBase
  let stop: () => Promise<void>

  beforeAll(async () => {
    url = await post.open()
    process.env.SMTP_URL = url
    const server = await launch('mail')
    base = server.base
    useBase(base)
    stop = server.stop
  }, 120_000)
  afterAll(async () => {
    delete process.env.SMTP_URL
    process.kill(base.pid, 'SIGCONT')
    await stop()
    await post.close()
  })

  const letters = (office: Office) => post.taken.filter(mail => mail.text?.includes(office.people.checker.name))

  /** Submits through a server of its own, which is killed while the mail server keeps it waiting; another one then takes over. */
  async function killedWhile(gate: Gate): Promise<Office> {
    const first = await startOwnServer()
    process.kill(base.pid, 'SIGSTOP')
    const office = await openOffice(first.url)
    const id = await newSheet(office, inputFilter())
    post.gate = gate
    const held = post.held()
    await submit(office, id)
    await held
    await first.kill()
    post.gate = 'accept'
    const { Job } = await import('../../server/database')
    const waiting = await Job.findAll({ where: { kind: 'email', state: 'running' } })
    expect(waiting).toHaveLength(1)
    // The lease would run out in its own time; the test does not wait for it.
    await Job.update({ leasedUntil: new Date(0) }, { where: { id: waiting[0]!.id } })
    const second = await startOwnServer()
    await expect.poll(async () => (await Job.findByPk(waiting[0]!.id))?.state, { timeout: 60_000, interval: 200 }).toBe('done')
    await second.stop()
    return office
  }

  it('sends it once when it had not been taken', async () => {
    const office = await killedWhile('hold before')
    expect(letters(office)).toHaveLength(1)
    expect(letters(office)[0]!.subject).toMatch(/^For checking: S-/)
  })

  it('sends the same message again when it had been taken unseen, so that readers show it once', async () => {
    const office = await killedWhile('hold after')
    const sent = letters(office)
    expect(sent).toHaveLength(2)
    expect(new Set(sent.map(mail => mail.messageId)).size).toBe(1)
  })
})
