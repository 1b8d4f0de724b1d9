import { readFileSync } from 'node:fs'
import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createPerson, PASSWORD, unique, type Person } from '../helpers/people'
import { pdfFacts } from '../pdf/support/poppler'
import { openBrowser, seat, shot, signIn, visit, type Seat } from './support/browser'
import { beginWriting, expectOutput, insertBlock, typeLines, waitSaved } from './support/pad'

/**
 * The whole job, by four people in four windows: from the client that is added to the file that the client verifies.
 * The circuit is a first-order low-pass of 1 kΩ and 100 nF: its corner is 1/(2πRC) = 1.59155 kHz, 10 log10(1 + (f/f_c)²) dB down
 * at f (closed forms; IEC 60050-103), so 20.04 dB at 15.9 kHz.
 */
const INVITED_PASSWORD = 'seven-long-ferries-at-dusk'

describe('from the first sign-in to the verified PDF', () => {
  const mark = unique()
  const client = `Skerry Lines ${mark}`
  const job = `26-${mark}`
  const title = `Level sensor, input filter ${mark}`
  const clientEmail = `client.${mark}@skerry.example`
  let browser: Browser
  let people: Record<'manager' | 'engineer' | 'checker', Person>
  const seats: Partial<Record<'manager' | 'engineer' | 'checker' | 'client', Seat>> = {}
  let sheetPath = ''
  let code = ''
  let pdf = Buffer.alloc(0)

  const at = (who: keyof typeof seats) => {
    const found = seats[who]
    if (!found) throw new Error(`The ${who} has not come in.`)
    return found.page
  }

  beforeAll(async () => {
    browser = await openBrowser()
    people = {
      manager: await createPerson({ roles: ['manager'] }),
      engineer: await createPerson({ roles: ['engineer'] }),
      checker: await createPerson({ roles: ['checker', 'engineer'] }),
    }
    for (const who of ['manager', 'engineer', 'checker'] as const) {
      seats[who] = await seat(browser)
      await signIn(at(who), people[who].email, PASSWORD)
    }
    seats.client = await seat(browser)
  })
  afterAll(() => browser?.close())

  it('lands each on their own work list', () => {
    expect(new URL(at('manager').url()).pathname).toBe('/board')
    expect(new URL(at('engineer').url()).pathname).toBe('/work')
    expect(new URL(at('checker').url()).pathname).toBe('/queue')
  })

  it('lets the manager add a client, invite its person and set up the project', async () => {
    const page = at('manager')
    await visit(page, '/organisations')
    await page.getByRole('button', { name: /New client/ }).first().click()
    await page.getByLabel('Name').fill(client)
    await page.getByRole('button', { name: 'Add the client' }).click()
    await page.getByRole('cell', { name: client, exact: true }).waitFor()

    await visit(page, '/people')
    await page.getByRole('button', { name: /Invite/ }).first().click()
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel('E-mail').fill(clientEmail)
    await dialog.getByLabel('Name', { exact: true }).fill('Maren Skerry')
    await dialog.getByRole('checkbox', { name: /^Client/ }).check()
    await dialog.getByRole('combobox', { name: 'Client' }).selectOption({ label: client })
    await dialog.getByRole('button', { name: 'Send the invitation' }).click()
    await dialog.waitFor({ state: 'hidden' })

    await visit(page, '/projects/new')
    await page.getByLabel('Job number').fill(job)
    await page.getByLabel('Title').fill('Skerry pier, tank gauges')
    await page.getByLabel('Client').selectOption({ label: client })
    await page.getByRole('group', { name: /^Members/ }).getByRole('checkbox', { name: new RegExp(people.engineer.name) }).check()
    await page.getByRole('group', { name: /^Members/ }).getByRole('checkbox', { name: new RegExp(people.checker.name) }).check()
    await page.getByRole('button', { name: 'Set up the project' }).click()
    await page.waitForURL(/\/projects\/[0-9A-Z]{26}$/)
    await shot(page, '01-project')
  })

  it('lets the invited client choose a password from the letter in the outbox', async () => {
    const manager = at('manager')
    await expect.poll(async () => {
      await visit(manager, '/outbox')
      return manager.getByRole('article').filter({ hasText: clientEmail }).count()
    }, { timeout: 30_000 }).toBe(1)
    const link = await manager.getByRole('article').filter({ hasText: clientEmail }).getByRole('link').first().getAttribute('href')
    const page = at('client')
    await visit(page, link ?? '')
    await page.getByLabel(/password/i).first().fill(INVITED_PASSWORD)
    await page.getByRole('button', { name: 'Set the password and come in' }).click()
    await page.waitForURL(/\/issued$/)
    await page.getByText('Nothing has been issued to you yet').waitFor()
  })

  it('lets the engineer write a live sheet', async () => {
    const page = at('engineer')
    await visit(page, '/projects')
    await page.getByRole('link', { name: /Skerry pier, tank gauges/ }).filter({ hasText: 'Skerry' }).first().click()
    await page.getByRole('button', { name: /Start a sheet/ }).first().click()
    await page.getByLabel('Sheet number').fill('G-001')
    await page.getByLabel('Title').fill(title)
    await page.getByRole('button', { name: 'Start the sheet' }).click()
    await page.waitForURL(/\/sheets\/[0-9A-Z]{26}$/)
    sheetPath = new URL(page.url()).pathname

    await beginWriting(page)
    await page.keyboard.type('The gauge is read through one RC section.')
    await insertBlock(page, 'Calculation')
    await typeLines(page, [
      { source: 'R = 1 kohm ± 1 %', reference: 'Metal film' },
      { source: 'C = 100 nF ± 5 %', reference: 'Film' },
      { source: 'H(s) = 1/(1 + s*R*C)' },
      { source: 'f_c = cornerFrequency(H) to kHz' },
    ])
    await expectOutput(page, 'f_c = cornerFrequency', /1\.592 kHz.*1\.501.*1\.692/)
    await insertBlock(page, 'Response')
    await page.locator('svg').filter({ hasText: /corner/ }).first().waitFor()
    await insertBlock(page, 'Requirements')
    await typeLines(page, [{ source: 'attenuation(H, 15.9 kHz) >= 19 dB # pump drive', reference: 'Client specification, clause 4' }])
    await expectOutput(page, 'attenuation(H, 15.9 kHz)', /met/)
    await waitSaved(page)
    await shot(page, '02-pad')
  })

  it('shows a second engineer the same text and results at once, and an error at its line only', async () => {
    const page = at('checker')
    await visit(page, sheetPath)
    await expectOutput(page, 'f_c = cornerFrequency', /1\.592 kHz/)
    const writer = at('engineer')
    await writer.locator('.line-source', { hasText: 'C = 100 nF' }).first().click()
    await writer.keyboard.press('End')
    await writer.keyboard.press('Enter')
    await writer.keyboard.type('x = R + C')
    await expectOutput(page, 'f_c = cornerFrequency', /1\.592 kHz/)
    await page.getByText(/cannot be added/).first().waitFor()
    for (let letter = 0; letter < 'x = R + C'.length + 1; letter++) await writer.keyboard.press('Backspace')
    await page.getByText(/cannot be added/).first().waitFor({ state: 'detached' })
    await waitSaved(writer)
  })

  it('submits to the checker with the signature of who prepared it', async () => {
    const page = at('engineer')
    await page.getByRole('button', { name: 'Submit for checking…' }).first().click()
    const dialog = page.getByRole('dialog')
    await dialog.getByText('Nothing stands in the way.').waitFor()
    await dialog.getByLabel('Checker').selectOption({ label: people.checker.name })
    await dialog.getByLabel(/^Due/).fill(new Date(Date.now() + 7 * 86_400_000).toISOString().slice(0, 10))
    await dialog.getByLabel('Your password, again').fill(PASSWORD)
    await shot(page, '03-submit')
    await dialog.getByRole('button', { name: 'Sign and submit' }).click()
    await dialog.waitFor({ state: 'hidden' })
    await page.getByText('For checking', { exact: true }).first().waitFor()
  })

  it('lets the checker annotate, the engineer answer, and the sheet come back', async () => {
    const checker = at('checker')
    await visit(checker, '/queue')
    await checker.getByRole('link', { name: title }).click()
    const row = checker.locator('.row', { hasText: 'C = 100 nF' }).first()
    await row.click()
    await checker.keyboard.press('a')
    await checker.getByPlaceholder(/changed, asked or said/).fill('Which dielectric? The tolerance over temperature is missing.')
    await checker.getByRole('button', { name: /^Annotate/ }).last().click()
    await checker.getByRole('article', { name: 'Annotation 1' }).waitFor()
    const sign = checker.getByRole('button', { name: /Sign as checked/ }).first()
    expect(await sign.getAttribute('aria-disabled') ?? await sign.getAttribute('disabled')).not.toBeNull()

    await checker.getByRole('button', { name: /Return to the author/ }).first().click()
    const dialog = checker.getByRole('dialog')
    await dialog.getByRole('textbox').fill('State the dielectric of C.')
    await dialog.getByRole('button', { name: /Return/ }).click()
    await dialog.waitFor({ state: 'hidden' })

    const engineer = at('engineer')
    await visit(engineer, sheetPath)
    await engineer.getByText('State the dielectric of C.').first().waitFor()
    const slip = engineer.getByRole('article', { name: 'Annotation 1' })
    await slip.getByRole('button', { name: 'Answer' }).click()
    await slip.getByPlaceholder('Your answer').fill('Polypropylene; stated in the reference now.')
    await slip.getByRole('button', { name: /^Answer/ }).first().click()
    await slip.getByText('Polypropylene').waitFor()
    await engineer.locator('.line-source', { hasText: 'C = 100 nF' }).first().click()
    await engineer.keyboard.press('Tab')
    await engineer.keyboard.press('End')
    await engineer.keyboard.type(', polypropylene')
    await waitSaved(engineer)
    await engineer.getByRole('button', { name: 'Submit for checking…' }).first().click()
    const submit = engineer.getByRole('dialog')
    await submit.getByText('Nothing stands in the way.').waitFor()
    await submit.getByLabel('Your password, again').fill(PASSWORD)
    await submit.getByRole('button', { name: 'Sign and submit' }).click()
    await submit.waitFor({ state: 'hidden' })
    await engineer.getByText('For checking', { exact: true }).first().waitFor()
  })

  it('lets the checker tick every line by the keyboard and sign', async () => {
    const page = at('checker')
    await visit(page, sheetPath)
    await page.getByRole('article', { name: 'Annotation 1' }).getByRole('button', { name: 'Close' }).click()
    await page.getByText('closed').first().waitFor()
    const ticks = page.locator('[data-tick]')
    const count = await ticks.count()
    expect(count).toBeGreaterThan(5)
    for (let line = 0; line < count; line++) {
      await page.keyboard.press('j')
      await page.keyboard.press('t')
      await expect.poll(() => page.locator('[data-tick][aria-pressed="true"]').count()).toBe(line + 1)
    }
    await shot(page, '04-checked')
    await page.getByRole('button', { name: /Sign as checked/ }).first().click()
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel('Your password, again').fill('not the password')
    await dialog.getByRole('button', { name: 'Sign as checked' }).click()
    await dialog.getByText(/password/i).nth(1).waitFor()
    await dialog.getByLabel('Your password, again').fill(PASSWORD)
    await dialog.getByRole('button', { name: 'Sign as checked' }).click()
    await dialog.waitFor({ state: 'hidden' })
    await page.getByText('Checked', { exact: true }).first().waitFor()
  })

  it('lets the manager approve and issue, and tells the client', async () => {
    const page = at('manager')
    await visit(page, '/board')
    await page.getByRole('link', { name: title }).click()
    await page.getByRole('button', { name: /Approve and issue/ }).first().click()
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel('Purpose of issue').selectOption({ label: 'For construction' })
    await dialog.getByLabel('Your password, again').fill(PASSWORD)
    await dialog.getByRole('button', { name: 'Approve and issue' }).click()
    const link = page.locator('a.issue-code')
    await link.waitFor({ timeout: 90_000 })
    code = (await link.innerText()).trim()
    await shot(page, '05-issued')
    await expect.poll(async () => {
      await visit(page, '/outbox')
      return page.getByRole('article').filter({ hasText: clientEmail }).filter({ hasText: 'G-001' }).count()
    }, { timeout: 30_000 }).toBe(1)
  })

  it('gives the client the stamped file, whole and readable', async () => {
    const page = at('client')
    await visit(page, '/issued')
    await page.getByRole('link', { name: title }).first().click()
    await page.getByText('For construction', { exact: false }).first().waitFor()
    await shot(page, '06-client')
    const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('button', { name: 'Download PDF' }).first().click()])
    pdf = readFileSync(await download.path())
    const facts = pdfFacts(pdf)
    const text = facts.pages.join('\n')
    expect(text).toContain(title)
    expect(text).toContain(code)
    expect(text).toMatch(/Uncontrolled when printed/)
    expect(text).toMatch(/1\.592/)
    for (const name of [people.engineer.name, people.checker.name, people.manager.name]) expect(text).toContain(name)
    facts.pages.forEach((one, at) => expect(one).toContain(`Page ${at + 1} of ${facts.pages.length}`))
    expect(facts.fonts.length).toBeGreaterThan(0)
    expect(facts.fonts.filter(font => !font.embedded)).toEqual([])
    expect(Object.keys(facts.attached).sort()).toEqual(['sheet-results.json', 'sheet-source.json'])
  })

  it('says to anyone whether a code is genuine', async () => {
    const stranger = await seat(browser, { width: 390, height: 844 })
    await visit(stranger.page, '/verify')
    await stranger.page.getByLabel('Verification code').fill(code.toLowerCase())
    await stranger.page.getByRole('button', { name: 'Verify' }).click()
    await stranger.page.getByText('Genuine', { exact: false }).first().waitFor()
    await stranger.page.getByText(title).first().waitFor()
    await shot(stranger.page, '07-verified-phone')
    await visit(stranger.page, `/verify/${code.slice(0, -1)}${code.endsWith('A') ? 'B' : 'A'}`)
    await stranger.page.getByText('Not genuine').waitFor()
    await stranger.context.close()
  })

  it('starts the next revision from the issued one, whose contributor cannot check it', async () => {
    const page = at('engineer')
    await visit(page, sheetPath)
    await page.getByRole('button', { name: /Start the next revision/ }).first().click()
    const dialog = page.getByRole('dialog')
    await dialog.getByRole('textbox').fill('Drive changed to 8 kHz.')
    await dialog.getByRole('button', { name: /revision/i }).last().click()
    await page.waitForURL(url => url.pathname.startsWith('/sheets/') && url.pathname !== sheetPath)
    await expectOutput(page, 'f_c = cornerFrequency', /1\.592 kHz/)
    await page.getByRole('button', { name: 'Submit for checking…' }).first().click()
    const options = page.getByRole('dialog').getByLabel('Checker').locator('option')
    await options.filter({ hasText: people.checker.name }).waitFor({ state: 'attached' })
    expect(await options.filter({ hasText: people.engineer.name }).count()).toBe(0)
  })

  it('left no error in anybody’s window', () => {
    expect(Object.entries(seats).map(([who, one]) => [who, one.errors])).toEqual([['manager', []], ['engineer', []], ['checker', []], ['client', []]])
  })
})
