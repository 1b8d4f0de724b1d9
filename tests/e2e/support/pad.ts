/** Writing on the pad as a person does: by the keyboard. */
import { expect } from 'vitest'
import type { Page } from 'playwright-core'

export interface TypedLine { source: string, reference?: string }

const editor = (page: Page) => page.locator('.ProseMirror[contenteditable="true"]')

export async function beginWriting(page: Page): Promise<void> {
  const edit = page.getByRole('button', { name: /^Edit/ })
  await editor(page).or(edit).first().waitFor()
  if (await edit.first().isVisible()) await edit.first().click()
  await editor(page).waitFor()
  await editor(page).locator('p').first().click()
}

export async function insertBlock(page: Page, kind: string): Promise<void> {
  await page.keyboard.press('Control+Enter')
  const box = page.getByRole('combobox', { name: 'Insert a block below' })
  await box.waitFor()
  await box.fill(kind)
  await page.keyboard.press('Enter')
  await box.waitFor({ state: 'hidden' })
}

/** Types lines one under the other; the caret stands in the first, which is empty. */
export async function typeLines(page: Page, lines: readonly TypedLine[]): Promise<void> {
  for (const [at, { source, reference }] of lines.entries()) {
    if (at > 0) await page.keyboard.press('Enter')
    await page.keyboard.type(source)
    if (!reference) continue
    await page.keyboard.press('Tab')
    await page.keyboard.type(reference)
    await page.keyboard.press('Shift+Tab')
  }
}

export async function waitSaved(page: Page): Promise<void> {
  await page.getByText('Saved', { exact: true }).first().waitFor()
}

/** The line whose formula is this, with what stands in its Output column. */
export async function expectOutput(page: Page, source: string, output: RegExp): Promise<void> {
  const row = page.locator('.row', { hasText: source }).first()
  await expect.poll(async () => (await row.locator('.row-output').first().innerText()).replace(/\s+/g, ' '), { timeout: 20_000 }).toMatch(output)
}
