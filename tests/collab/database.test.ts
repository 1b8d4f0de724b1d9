/** The database killed and started again under a running server. It is one of this test's own, since others share theirs. */
import { join } from 'node:path'
import { rmSync } from 'node:fs'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it, vi } from 'vitest'
import { startMariadb } from '../../scripts/lib/mariadb.mjs'
import type { Mariadb } from '../../scripts/lib/mariadb.mjs'
import { ROOT } from '../../scripts/lib/paths.mjs'
import { run } from '../../scripts/lib/process.mjs'
import { startOwnServer, type OwnServer } from '../helpers/server'
import { closePages, openPage } from './support/sheet'

const folder = join(inject('base').dataDir, 'mariadb-of-its-own')
let mariadb: Mariadb
let server: OwnServer
let drafts: typeof import('./support/drafts')

beforeAll(async () => {
  mariadb = await startMariadb(folder)
  mariadb.createSchema('collab')
  process.env.DATABASE_URL = mariadb.url('collab')
  run(process.execPath, ['node_modules/tsx/dist/cli.mjs', '--tsconfig', 'scripts/tsconfig.json', 'scripts/database.ts'], { quiet: true, cwd: ROOT, env: process.env })
  // Only now: the models connect to what DATABASE_URL says when they are loaded.
  drafts = await import('./support/drafts')
  server = await startOwnServer({ databaseUrl: mariadb.url('collab') })
}, 120_000)

afterEach(closePages)
afterAll(async () => {
  await server?.stop()
  await mariadb?.stop()
  rmSync(folder, { recursive: true, force: true })
})

async function killDatabase() {
  const pid = mariadb.pid()
  process.kill(pid, 'SIGKILL')
  await vi.waitFor(() => expect(() => process.kill(pid, 0)).toThrow(), { timeout: 10_000 })
}

describe('a database that is killed', () => {
  it('turns Saved into Saving, relays nothing meanwhile, and goes on by itself when it is back', async () => {
    const draft = await drafts.createDraft(2)
    const [ines, tomas] = await Promise.all(draft.members.map(person => openPage(person, draft, { base: server.url })))
    await Promise.all([ines!.saved(), tomas!.saved()])
    ines!.write('before')
    await Promise.all([ines!.saved(), tomas!.shows('before')])

    await killDatabase()
    ines!.write('while it is away')
    tomas!.write('and of Tomas')
    await ines!.facts.wait(({ sent, upTo }) => sent > upTo, 'on its way')
    expect(ines!.state().kind).toBe('saving')
    expect(tomas!.plain()).not.toContain('while it is away')

    mariadb = await startMariadb(folder)
    await Promise.all([ines!.saved(), tomas!.saved(), tomas!.shows('while it is away'), ines!.shows('and of Tomas')])
    const stored = (await drafts.storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()
    expect(stored).toBe(ines!.plain())
    expect(stored).toBe(tomas!.plain())
    expect(ines!.sheet.facts().closed).toBeNull()
  }, 90_000)

  it('again and again amid writing loses nothing that was called saved', async () => {
    const draft = await drafts.createDraft(2)
    const pages = await Promise.all(draft.members.map(person => openPage(person, draft, { base: server.url })))
    await Promise.all(pages.map(page => page.saved()))
    const saved: string[] = []
    for (let round = 0; round < 3; round++) {
      for (let i = 0; i < 20; i++) {
        pages[i % 2]!.write(`r${round}-${i};`)
        await new Promise(resolve => setImmediate(resolve))
      }
      await killDatabase()
      pages[0]!.write(`r${round}-late;`)
      mariadb = await startMariadb(folder)
      await Promise.all(pages.map(page => page.saved()))
      for (let i = 0; i < 20; i++) saved.push(`r${round}-${i};`)
      saved.push(`r${round}-late;`)
    }
    const stored = (await drafts.storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()
    for (const word of saved) expect(stored.split(`>${word}<`)).toHaveLength(2)
    await Promise.all(pages.map(page => page.text.wait(plain => plain === stored, 'all alike')))
  }, 120_000)

  it('lets nobody open an empty sheet while it is away; they come in when it is back', async () => {
    const draft = await drafts.createDraft(2)
    const first = await openPage(draft.author, draft, { base: server.url })
    await first.saved()
    const second = await openPage(draft.members[1]!, draft, { base: server.url, offline: true })
    await killDatabase()
    second.sheet.connect()
    await second.facts.wait(({ lost }) => lost, 'turned away')
    expect(second.plain()).toBe('')
    expect(second.sheet.facts().closed).toBeNull()
    mariadb = await startMariadb(folder)
    await second.saved()
    expect(second.plain()).toBe(first.plain())
  }, 90_000)
})
