/** Real Chromium, one context a person, so that nobody shares a cookie or a store with anybody. */
import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import { base } from '../../helpers/base'

const ARGUMENTS = [
  '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync',
]

export function openBrowser(): Promise<Browser> {
  const root = process.getuid?.() === 0
  return chromium.launch({ executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium', args: root ? [...ARGUMENTS, '--no-sandbox'] : ARGUMENTS })
}

export interface Seat { context: BrowserContext, page: Page, errors: string[] }

/** A person's own browser window. What the page throws or logs as an error is kept. */
export async function seat(browser: Browser, { width = 1440, height = 900 } = {}): Promise<Seat> {
  const context = await browser.newContext({ baseURL: base().url, viewport: { width, height }, acceptDownloads: true })
  context.setDefaultTimeout(30_000)
  const page = await context.newPage()
  const errors: string[] = []
  page.on('pageerror', error => errors.push(error.message))
  return { context, page, errors }
}

/** Opens a page and waits until it answers to the keyboard and the mouse. */
export async function visit(page: Page, path: string): Promise<void> {
  await page.goto(path)
  await hydrated(page)
}

export async function hydrated(page: Page): Promise<void> {
  await page.waitForFunction(() => {
    const root = document.querySelector('#__nuxt') as (Element & { __vue_app__?: unknown }) | null
    return Boolean(root?.__vue_app__) && !(window as unknown as { useNuxtApp?: () => { isHydrating?: boolean } }).useNuxtApp?.().isHydrating
  })
}

export async function signIn(page: Page, email: string, password: string): Promise<void> {
  await visit(page, '/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password', { exact: true }).fill(password)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL(url => url.pathname !== '/sign-in')
}

/** Set POLEWRIGHT_SHOTS to a folder to look at what the test saw. */
export async function shot(page: Page, name: string): Promise<void> {
  const folder = process.env.POLEWRIGHT_SHOTS
  if (!folder) return
  mkdirSync(folder, { recursive: true })
  await page.screenshot({ path: join(folder, `${name}.png`), fullPage: true })
}
