import { afterAll, afterEach, describe, expect, it } from 'vitest'
import { freePort } from '../../scripts/lib/process.mjs'
import { startOwnServer, type OwnServer } from '../helpers/server'
import { createDraft, storedDocument } from './support/drafts'
import { closePages, openPage, type Page } from './support/sheet'
import { expectAllSaved, randomFrom, Writer } from './support/tokens'

/** A long run: `POLEWRIGHT_KILLS=200 npx vitest run --project collab tests/collab/kill.test.ts`. */
const KILLS = Number(process.env.POLEWRIGHT_KILLS ?? 5)
const SEED = Number(process.env.POLEWRIGHT_SEED ?? 20260401)

let server: OwnServer | null = null
afterEach(closePages)
afterAll(() => server?.stop())

/** Notes each word as saved at the moment the page hears of it. */
function keepNotes(writer: Writer) {
  writer.page.facts.wait(() => (writer.note(), false), '').catch(() => undefined)
}

async function allAlike(pages: readonly Page[], revisionId: string): Promise<string> {
  await Promise.all(pages.map(page => page.saved()))
  const stored = (await storedDocument(revisionId)).getXmlFragment('sheet').toString()
  await Promise.all(pages.map(page => page.text.wait(plain => plain === stored, `${page.person.name} sees what is stored`)))
  return stored
}

describe('a server that is killed amid writing', () => {
  it(`loses nothing that it called saved, and everyone ends up with the same sheet (seed ${SEED}, ${KILLS} kills)`, async () => {
    const random = randomFrom(SEED)
    const port = await freePort()
    server = await startOwnServer({ port })
    const draft = await createDraft(3)
    const pages = await Promise.all(draft.members.map(person => openPage(person, draft, { base: server!.url })))
    const writers = pages.map((page, i) => new Writer(page, `k${i}-`, random))
    writers.forEach(keepNotes)
    await Promise.all(pages.map(page => page.saved()))

    for (let kill = 0; kill < KILLS; kill++) {
      const steps = 20 + Math.floor(random() * 60)
      for (let i = 0; i < steps; i++) {
        writers[Math.floor(random() * 3)]!.step()
        // Between some of the edits the network gets a turn, so that the kill finds frames at every stage.
        if (random() < 0.5) await new Promise(resolve => setImmediate(resolve))
        if (random() < 0.02) {
          const page = pages[Math.floor(random() * 3)]!
          page.disconnect()
          page.sheet.connect()
        }
      }
      await server.kill()
      writers.forEach(writer => writer.step())
      server = await startOwnServer({ port })
    }
    const stored = await allAlike(pages, draft.revisionId)
    writers.forEach(writer => writer.note())
    expectAllSaved(stored, writers)
    for (const writer of writers) expect(writer.saved.size).toBe(writer.written.length)
  }, 60_000 + KILLS * 10_000)
})
