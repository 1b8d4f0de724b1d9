/**
 * The demonstration's mail server: an SMTP server on loopback that delivers to nobody and keeps what it is given in the data folder.
 * A message repeated with the same Message-ID is kept once, with the number of times it came.
 */
import { createHash } from 'node:crypto'
import { mkdir, readFile, readdir, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { Readable } from 'node:stream'
import type { AddressInfo } from 'node:net'
import { simpleParser } from 'mailparser'
import type { AddressObject } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import { z } from 'zod'

const keptSchema = z.object({
  id: z.string(),
  receivedAt: z.string(),
  times: z.number(),
  from: z.string(),
  to: z.array(z.object({ name: z.string(), address: z.string() })),
  subject: z.string(),
  text: z.string(),
})
export type KeptMessage = z.infer<typeof keptSchema>

/** Largest message taken, in bytes. */
const MAX_MESSAGE = 1024 * 1024
/** How many messages the outbox shows. */
const SHOWN = 200

export interface Outbox { port: number, close: () => Promise<void> }

const fileOf = (folder: string, id: string) => join(folder, `${createHash('sha256').update(id).digest('hex').slice(0, 32)}.json`)

async function readKept(path: string): Promise<KeptMessage | null> {
  const text = await readFile(path, 'utf8').catch(() => null)
  if (text === null) return null
  const parsed = keptSchema.safeParse(JSON.parse(text))
  return parsed.success ? parsed.data : null
}

const addresses = (field: AddressObject | AddressObject[] | undefined) =>
  (field === undefined ? [] : Array.isArray(field) ? field : [field])
    .flatMap(list => list.value)
    .map(one => ({ name: one.name, address: one.address ?? '' }))

async function keep(folder: string, stream: Readable): Promise<void> {
  const mail = await simpleParser(stream)
  const id = mail.messageId ?? createHash('sha256').update(mail.text ?? '').digest('hex')
  const path = fileOf(folder, id)
  const before = await readKept(path)
  const kept: KeptMessage = {
    id,
    receivedAt: before?.receivedAt ?? new Date().toISOString(),
    times: (before?.times ?? 0) + 1,
    from: mail.from?.text ?? '',
    to: addresses(mail.to),
    subject: mail.subject ?? '',
    text: mail.text ?? '',
  }
  await mkdir(folder, { recursive: true })
  await writeFile(`${path}.part`, JSON.stringify(kept))
  await rename(`${path}.part`, path)
}

/** Starts the server on a free port of loopback; one message after the other is written, so that a repetition finds the first. */
export async function openOutbox(folder: string): Promise<Outbox> {
  let last: Promise<void> = Promise.resolve()
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: MAX_MESSAGE,
    logger: false,
    onData(stream, _session, done) {
      last = last.catch(() => {}).then(() => keep(folder, stream))
      last.then(() => done(), (error: unknown) => done(error instanceof Error ? error : new Error('The message could not be kept.')))
    },
  })
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(0, '127.0.0.1', resolve)
  })
  const { port } = server.server.address() as AddressInfo
  return { port, close: () => new Promise(resolve => server.close(() => resolve())) }
}

/** The newest first. */
export async function keptMessages(folder: string): Promise<KeptMessage[]> {
  const names = await readdir(folder).catch(() => [])
  const all = await Promise.all(names.filter(name => name.endsWith('.json')).map(name => readKept(join(folder, name))))
  return all.filter(one => one !== null)
    .sort((a, b) => b.receivedAt.localeCompare(a.receivedAt) || a.id.localeCompare(b.id))
    .slice(0, SHOWN)
}
