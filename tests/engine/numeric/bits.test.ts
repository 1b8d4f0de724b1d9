import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { build } from 'esbuild'
import { chromium } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { fingerprints } from './bits'

/**
 * computed with this engine under Node 20.20 on x86-64. A difference means that recorded results
 * would no longer be reproduced: it takes a new version of the engine, not new fingerprints.
 */
const EXPECTED = JSON.parse(readFileSync(new URL('../data/fingerprints.json', import.meta.url), 'utf8')) as Record<string, string>

describe('the same bits', () => {
  it('in Node as ever', { timeout: 120_000 }, () => {
    expect(fingerprints()).toEqual(EXPECTED)
  })

  describe('in a browser', () => {
    let browser: Awaited<ReturnType<typeof chromium.launch>>

    beforeAll(async () => {
      const root = process.getuid?.() === 0
      browser = await chromium.launch({
        executablePath: process.env.CHROMIUM_PATH || '/usr/bin/chromium',
        chromiumSandbox: !root,
        args: ['--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
      })
    }, 60_000)

    afterAll(async () => {
      await browser?.close()
    })

    it('as in Node', { timeout: 120_000 }, async () => {
      const bundle = await build({
        entryPoints: [fileURLToPath(new URL('./bits.ts', import.meta.url))],
        bundle: true, write: false, format: 'iife', globalName: 'bits', platform: 'browser', target: 'es2022',
      })
      const page = await browser.newPage()
      const found = await page.evaluate(`${bundle.outputFiles[0]!.text}; bits.fingerprints()`)
      expect(found).toEqual(EXPECTED)
    })
  })
})
