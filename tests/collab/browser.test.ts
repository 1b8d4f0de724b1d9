/** What this device keeps, in a real browser: real IndexedDB, real cookies, and tabs that are killed. */
import { join } from 'node:path'
import { build } from 'esbuild'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { Revision, RevisionDoc, RevisionUpdate } from '../../server/database'
import { ROOT } from '../../scripts/lib/paths.mjs'
import { freePort } from '../../scripts/lib/process.mjs'
import { startOwnServer, type OwnServer } from '../helpers/server'
import { openSessionFor, SESSION_COOKIE, type Person } from '../helpers/people'
import { createDraft, freeze, storedDocument, type Draft } from './support/drafts'
import type { SheetOnly } from './support/browserPage'

declare global {
  interface Window { sheetOnly: SheetOnly }
}

const FLAGS = [
  '--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync',
  // The page itself comes from the test and not from the server, so the browser takes its address for a public one.
  '--disable-features=LocalNetworkAccessChecks',
]

let browser: Browser
let script = ''
let server: OwnServer
let port = 0

beforeAll(async () => {
  const folder = join(ROOT, 'tests/collab/support')
  const bundle = await build({
    entryPoints: [join(folder, 'browserPage.ts')], inject: [join(folder, 'browserImports.ts')],
    bundle: true, write: false, format: 'iife', platform: 'browser', alias: { '~~': ROOT.replace(/\/$/, '') }, define: { 'process.env.NODE_ENV': '"production"' },
  })
  script = bundle.outputFiles[0]!.text
  port = await freePort()
  server = await startOwnServer({ port })
  browser = await chromium.launch({ executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium', args: FLAGS })
}, 120_000)

afterAll(async () => {
  await browser?.close()
  await server?.stop()
})

/** One browser with its storage; the sheet's code is served under the server's own address. */
async function device(): Promise<BrowserContext> {
  const context = await browser.newContext()
  await context.route('**/sheet-only', route => route.fulfill({ contentType: 'text/html', body: `<!doctype html><script>${script.replaceAll('</script', '<\\/script')}</script>` }))
  return context
}

async function signIn(context: BrowserContext, person: Person) {
  await context.clearCookies()
  await context.addCookies([{ name: SESSION_COOKIE, value: (await openSessionFor(person)).cookie, url: server.url }])
}

async function openSheet(context: BrowserContext, draft: Pick<Draft, 'revisionId' | 'epoch'>, person: Person): Promise<Page> {
  const page = await context.newPage()
  await page.goto(`${server.url}/sheet-only`)
  await page.evaluate(([id, epoch, user]) => window.sheetOnly.open({ id, epoch }, user), [draft.revisionId, draft.epoch, person.id] as const)
  return page
}

const becomes = (page: Page, kind: string) => page.waitForFunction(wanted => window.sheetOnly.kind() === wanted, kind)
const shows = (page: Page, text: string) => page.waitForFunction(wanted => window.sheetOnly.plain().includes(wanted), text)
const write = (page: Page, text: string) => page.evaluate(given => window.sheetOnly.write(given), text)
const stored = async (draft: Draft) => (await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()

/** A tab that is gone from one moment to the next: nothing of the page runs any more. */
async function crash(page: Page) {
  const gone = page.waitForEvent('crash')
  const session = await page.context().newCDPSession(page)
  session.send('Page.crash').catch(() => undefined)
  await gone
}

/** Waits until IndexedDB has taken what was written before: a transaction of its own comes after theirs. */
const settleStorage = (page: Page) => page.evaluate(async () => {
  for (const name of await window.sheetOnly.kept()) {
    await new Promise<void>((resolve, reject) => {
      const opening = indexedDB.open(name!)
      opening.onerror = () => reject(opening.error)
      opening.onsuccess = () => {
        const reading = opening.result.transaction(['updates'], 'readwrite')
        reading.oncomplete = () => {
          opening.result.close()
          resolve()
        }
      }
    })
  }
})

describe('what this device keeps', () => {
  it('comes back after the server was away and the tab was killed', async () => {
    const draft = await createDraft(1)
    const context = await device()
    await signIn(context, draft.author)
    const tab = await openSheet(context, draft, draft.author)
    await becomes(tab, 'saved')
    await server.kill()
    await becomes(tab, 'offline')
    expect(await tab.evaluate(() => window.sheetOnly.label())).toBe('Offline, kept on this device')
    await write(tab, 'written while the server was away')
    await settleStorage(tab)
    await crash(tab)

    server = await startOwnServer({ port })
    expect(await stored(draft)).not.toContain('server was away')
    const again = await openSheet(context, draft, draft.author)
    await becomes(again, 'saved')
    expect(await again.evaluate(() => window.sheetOnly.plain())).toContain('written while the server was away')
    expect(await stored(draft)).toContain('written while the server was away')
    await context.close()
  })

  it('is shown at once, before the server answers', async () => {
    const draft = await createDraft(1)
    const context = await device()
    await signIn(context, draft.author)
    const tab = await openSheet(context, draft, draft.author)
    await becomes(tab, 'saved')
    await settleStorage(tab)
    await tab.goto('about:blank')
    await context.route('**/collaboration/**', route => route.abort())
    await context.routeWebSocket('**/collaboration/**', socket => socket.close())
    const offline = await openSheet(context, draft, draft.author)
    await offline.waitForFunction(() => window.sheetOnly.ready())
    expect(await offline.evaluate(() => window.sheetOnly.plain())).toContain('R = 47 ohm')
    await context.close()
  })

  it('stays each person’s own: another one on the same browser neither sees nor sends it', async () => {
    const draft = await createDraft(2)
    const [ines, tomas] = draft.members as [Person, Person]
    const context = await device()
    await signIn(context, ines)
    const hers = await openSheet(context, draft, ines)
    await becomes(hers, 'saved')
    await server.kill()
    await becomes(hers, 'offline')
    await write(hers, 'private to Ines')
    await settleStorage(hers)
    await crash(hers)
    server = await startOwnServer({ port })

    await signIn(context, tomas)
    const his = await openSheet(context, draft, tomas)
    await becomes(his, 'saved')
    await write(his, 'by Tomas')
    await becomes(his, 'saved')
    expect(await his.evaluate(() => window.sheetOnly.plain())).not.toContain('private to Ines')
    expect(await stored(draft)).not.toContain('private to Ines')
    expect(await his.evaluate(() => window.sheetOnly.kept())).toEqual([`${draft.revisionId}/1/${ines.id}`, `${draft.revisionId}/1/${tomas.id}`].sort())
    await his.close()

    await signIn(context, ines)
    const back = await openSheet(context, draft, ines)
    await shows(back, 'by Tomas')
    await becomes(back, 'saved')
    expect(await stored(draft)).toContain('private to Ines')
    const rows = await RevisionUpdate.findAll({ where: { revisionId: draft.revisionId, userId: tomas.id } })
    expect(rows.some(row => row.bytes.includes('private to Ines'))).toBe(false)
    await context.close()
  })
})

describe('a freeze', () => {
  const comeBack = (draft: Draft) => Promise.all([
    Revision.update({ state: 'draft' }, { where: { id: draft.revisionId } }),
    RevisionDoc.update({ state: 'draft' }, { where: { revisionId: draft.revisionId } }),
  ])

  it('that found everything saved leaves nothing to show', async () => {
    const draft = await createDraft(1)
    const context = await device()
    await signIn(context, draft.author)
    const tab = await openSheet(context, draft, draft.author)
    await becomes(tab, 'saved')
    await write(tab, 'in the submission')
    await becomes(tab, 'saved')
    await freeze(draft.revisionId)
    await becomes(tab, 'frozen')
    expect(await tab.evaluate(() => window.sheetOnly.unsent())).toBeNull()
    await settleStorage(tab)
    await tab.close()

    await comeBack(draft)
    const again = await openSheet(context, { ...draft, epoch: 2 }, draft.author)
    await becomes(again, 'saved')
    await again.waitForFunction(async () => (await window.sheetOnly.kept()).length === 1)
    expect(await again.evaluate(() => window.sheetOnly.unsent())).toBeNull()
    await context.close()
  })

  it('that came first leaves the edits with their author, offered in the next draft and never merged by themselves', async () => {
    const draft = await createDraft(1)
    const context = await device()
    await signIn(context, draft.author)
    const tab = await openSheet(context, draft, draft.author)
    await becomes(tab, 'saved')
    await server.kill()
    await becomes(tab, 'offline')
    await write(tab, 'too late for the submission')
    await freeze(draft.revisionId)
    server = await startOwnServer({ port })
    await becomes(tab, 'frozen')
    await tab.waitForFunction(() => window.sheetOnly.unsent()?.blocks.some(block => block.text === 'too late for the submission'))
    await settleStorage(tab)
    await crash(tab)

    await comeBack(draft)
    const again = await openSheet(context, { ...draft, epoch: 2 }, draft.author)
    await becomes(again, 'saved')
    await again.waitForFunction(() => window.sheetOnly.unsent()?.epoch === 1)
    expect(await again.evaluate(() => window.sheetOnly.unsent())).toMatchObject({ blocks: [{ kind: 'paragraph', text: 'too late for the submission' }], removals: 0 })
    expect(await stored(draft)).not.toContain('too late')

    await again.evaluate(() => window.sheetOnly.live!.putBackUnsent())
    await becomes(again, 'saved')
    expect(await stored(draft)).toContain('too late for the submission')
    expect(await again.evaluate(() => window.sheetOnly.unsent())).toBeNull()
    expect(await again.evaluate(() => window.sheetOnly.kept())).toEqual([`${draft.revisionId}/2/${draft.author.id}`])
    await context.close()
  })
})
