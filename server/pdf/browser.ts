/**
 * Debian's Chromium, started when it is first needed, used again, and ended when idle.
 * It runs no scripts, resolves no host names, and loads one page of this server with that page's own styles and fonts: all else is refused.
 */
import { chromium } from 'playwright-core'
import type { Browser, BrowserContext, Page, Route } from 'playwright-core'
import { outsideSettings } from '../utils/outside'

export interface PrintRequest {
  /** Path of the page on this server. */
  path: string
  /** Bytes for the images of the sheet, by path; a path that is not in it is refused. */
  files: ReadonlyMap<string, { mime: string, bytes: Buffer }>
}

const PAGE_TIMEOUT_MS = 60_000
const IDLE_MS = 5 * 60_000
/** A browser that has printed this often is replaced, whatever it may have kept. */
const MAX_USES = 200
/** A PDF above this size is refused, in bytes. */
const MAX_SIZE = 64 * 1024 * 1024

const FLAGS = [
  '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking',
  '--disable-component-update', '--disable-sync', '--disable-extensions', '--disable-dev-shm-usage',
  '--host-resolver-rules=MAP * ~NOTFOUND , EXCLUDE 127.0.0.1',
]

let running: Promise<Browser> | null = null
let uses = 0
let idle: NodeJS.Timeout | undefined
let last: Promise<unknown> = Promise.resolve()

async function launched(): Promise<Browser> {
  if (running && ++uses > MAX_USES) await closeBrowser()
  if (!running) {
    uses = 1
    // Chromium cannot build its sandbox for root; elsewhere it keeps it.
    const args = process.getuid?.() === 0 ? [...FLAGS, '--no-sandbox'] : FLAGS
    running = chromium.launch({ executablePath: outsideSettings().chromiumPath, args, chromiumSandbox: process.getuid?.() !== 0 })
    const started = running
    const forget = () => { running = running === started ? null : running }
    started.then(browser => browser.once('disconnected', forget), forget)
  }
  return running
}

export async function closeBrowser(): Promise<void> {
  clearTimeout(idle)
  const browser = await running?.catch(() => null)
  running = null
  await browser?.close()
}

/** Decides on one request; `refused` collects what a sheet should not have asked for or did not get. */
function gate(request: PrintRequest, refused: string[]) {
  const origin = new URL(outsideSettings().loopbackUrl).origin
  return async (route: Route) => {
    const url = new URL(route.request().url())
    const file = request.files.get(url.pathname)
    const own = url.origin === origin && route.request().method() === 'GET'
    if (own && file) return route.fulfill({ contentType: file.mime, body: file.bytes })
    if (own && (url.pathname === request.path || url.pathname.startsWith('/_nuxt/'))) {
      const answer = await route.fetch({ maxRedirects: 0, timeout: PAGE_TIMEOUT_MS })
      if (answer.status() === 200) return route.fulfill({ response: answer })
    }
    // A script or the icon is part of every page of the application; it is neither run nor needed here.
    if (own && ['script', 'other'].includes(route.request().resourceType())) return route.abort()
    refused.push(url.origin === origin ? url.pathname : url.href.slice(0, 200))
    return route.abort()
  }
}

async function printPage(page: Page, request: PrintRequest): Promise<Buffer> {
  const answer = await page.goto(outsideSettings().loopbackUrl + request.path, { waitUntil: 'load', timeout: PAGE_TIMEOUT_MS })
  if (answer?.status() !== 200) throw new Error(`The print page answered ${answer?.status() ?? 'nothing'}.`)
  const failedFonts = await page.evaluate<string[]>('document.fonts.ready.then(() => [...document.fonts].filter(f => f.status === "error").map(f => f.family))')
  if (failedFonts.length > 0) throw new Error(`Fonts did not load: ${failedFonts.join(', ')}.`)
  return page.pdf({ preferCSSPageSize: true, printBackground: true, tagged: true, outline: true })
}

async function printOnce(request: PrintRequest): Promise<Buffer> {
  clearTimeout(idle)
  const browser = await launched()
  let context: BrowserContext | null = null
  const refused: string[] = []
  const overrun = setTimeout(() => { void closeBrowser() }, 2 * PAGE_TIMEOUT_MS)
  try {
    context = await browser.newContext({ javaScriptEnabled: false, serviceWorkers: 'block', acceptDownloads: false, colorScheme: 'light', locale: 'en-GB', timezoneId: 'UTC' })
    await context.route('**/*', gate(request, refused))
    const pdf = await printPage(await context.newPage(), request)
    if (refused.length > 0) throw new Error(`The sheet asked for what it may not load: ${refused.join(', ')}.`)
    if (pdf.byteLength > MAX_SIZE) throw new Error('The PDF is larger than 64 MiB.')
    return pdf
  }
  finally {
    clearTimeout(overrun)
    await context?.close().catch(() => {})
    idle = setTimeout(() => { void closeBrowser() }, IDLE_MS).unref()
  }
}

/** The page as PDF. One at a time; rejects when anything on the page did not load, so that no incomplete sheet is ever stored. */
export function printToPdf(request: PrintRequest): Promise<Buffer> {
  const result = last.catch(() => {}).then(() => printOnce(request))
  last = result
  return result
}
