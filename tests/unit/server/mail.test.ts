import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { closeMail, outboxMessages, sendLetter, sendMail } from '../../../server/mail'
import { letterText } from '../../../server/mail/letters'
import type { Letter } from '../../../server/mail'
import { mailOptions } from '../../../server/mail/message'

const FROM = { name: 'Polewright', address: 'office@haldenvoss.example' }
const sheet = { job: '2604', number: 'C-014', title: 'Auxiliary supply, input filter', revision: 'B' }
const to = { name: 'Marta Lindqvist', address: 'marta.lindqvist@haldenvoss.example' }

describe('headers', () => {
  const attack = { key: 'k', to: { name: 'Eve\r\nBcc: everyone@example.com', address: 'eve@example.com' }, subject: 'Hello\r\nX-Header: 1', text: 'x' }

  it('hold no line break that a person typed', () => {
    const options = mailOptions(attack, FROM)
    expect(options.subject).toBe('Hello X-Header: 1')
    expect(options.to).toEqual([{ name: 'Eve Bcc: everyone@example.com', address: 'eve@example.com' }])
  })

  it.each(['a@b.example, c@d.example', 'group: a@b.example;', 'a@b.example\r\nc@d.example', '"x" <a@b.example>', ''])('refuse %j as an address', (address) => {
    expect(() => mailOptions({ ...attack, to: { name: 'Eve', address } }, FROM)).toThrow('not a single e-mail address')
  })

  it('give a repeated sending the same Message-ID and another sending another', () => {
    const id = (key: string) => mailOptions({ ...attack, key }, FROM).messageId
    expect(id('email:1')).toBe(id('email:1'))
    expect(id('email:1')).not.toBe(id('email:2'))
  })
})

describe('letters', () => {
  const letters: Letter[] = [
    { kind: 'invitation', to, by: 'Ruth Osei', link: '/invitation/abc', expires: '2026-12-08T09:00:00.000Z' },
    { kind: 'password_reset', to, link: '/reset/abc', expires: '2026-12-08T09:00:00.000Z' },
    { kind: 'checker_asked', to, sheet, by: 'Ines Varga', link: '/sheets/1', due: '2026-12-04' },
    { kind: 'returned', to, sheet, by: 'Marta Lindqvist', link: '/sheets/1', reason: 'Line 4 lacks its source.' },
    { kind: 'recalled', to, sheet, by: 'Ines Varga', link: '/sheets/1', reason: null },
    { kind: 'issue_failed', to, sheet, by: 'Ruth Osei', link: '/sheets/1', reason: 'The browser did not start.' },
    { kind: 'issued', to, sheet, by: 'Ruth Osei', link: '/issued/1', purpose: 'for construction', code: 'ABCD', supersedes: 'A' },
    { kind: 'withdrawn', to, sheet, by: 'Ruth Osei', link: '/issued/1', reason: 'The load has changed.' },
  ]

  it.each(letters)('$kind names what it is about and where to go', (letter) => {
    const { subject, text } = letterText(letter, 'https://calc.example')
    expect(text).toContain(`https://calc.example${letter.link}`)
    expect(text.startsWith('Marta Lindqvist,\n\n')).toBe(true)
    expect(text).not.toMatch(/undefined|null|\[object/)
    if ('sheet' in letter) expect(subject).toContain('C-014 revision B')
  })

  it('say the due date in words', () => {
    expect(letterText(letters[2]!, '').text).toContain('due on 4 December 2026')
  })
})

describe('the outbox of the demonstration', () => {
  let folder: string
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), 'outbox-'))
    process.env.POLEWRIGHT_DATA_DIR = folder
    delete process.env.SMTP_URL
  })
  afterEach(async () => {
    await closeMail()
    delete process.env.POLEWRIGHT_DATA_DIR
    await rm(folder, { recursive: true })
  })

  it('keeps a letter as it was sent over SMTP', async () => {
    await sendLetter({ kind: 'returned', to, sheet, by: 'Marta Lindqvist', link: '/sheets/1', reason: '±20 % at 25 °C only; “what at 85 °C?”' }, 'job-1')
    const [message, ...others] = await outboxMessages()
    expect(others).toEqual([])
    expect(message).toMatchObject({ to: [to], subject: 'Returned: C-014 revision B', times: 1 })
    expect(message!.text).toContain('±20 % at 25 °C only; “what at 85 °C?”')
  })

  it('shows a repeated sending once, and says that it came twice', async () => {
    const message = { key: 'job-2', to, subject: 'Once', text: 'Once' }
    await Promise.all([sendMail(message), sendMail(message)])
    await sendMail({ ...message, key: 'job-3' })
    const kept = await outboxMessages()
    expect(kept.map(one => one.times).sort()).toEqual([1, 2])
  })
})
