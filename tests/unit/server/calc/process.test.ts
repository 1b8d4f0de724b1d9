import { createHash } from 'node:crypto'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeAll, afterAll, describe, expect, it, vi } from 'vitest'
import { buildEngineProcess } from '../../../../modules/engineProcess'
import { compute } from '../../../../server/calc/compute'
import type { SheetDocument } from '../../../../shared/document/types'

const ROOT = join(import.meta.dirname, '../../../..')
const folder = mkdtempSync(join(tmpdir(), 'polewright-calc-'))
const bundle = join(folder, 'engine-process.mjs')
const settings = { significantDigits: 4 }
const line = (id: string, source: string) => ({ type: 'line' as const, attrs: { id, status: null }, content: [{ type: 'source' as const, content: [{ type: 'text' as const, text: source }] }] })
const sheet: SheetDocument = {
  type: 'doc',
  content: [{
    type: 'calculation',
    attrs: { id: 'c', reference: '' },
    content: [line('r', 'R = 4.7 kohm +- 5 %'), line('c', 'C = 10 nF'), line('h', 'H(s) = 1/(1 + s*R*C)'), line('g', 'gain(H, 10 kHz)'), line('bad', 'x = R + C')],
  }, {
    type: 'response',
    attrs: { id: 'plot', reference: '', transfer: 'G', from: '', to: '', showPhase: true, showStep: false, showAsymptotes: false, duration: '', supply: '', rating: '', caption: '' },
  }],
}

let open: { closeCalc: () => void } | null = null
/** The module with nothing kept from before, on this bundle. */
async function calc(path: string) {
  vi.resetModules()
  vi.stubEnv('POLEWRIGHT_ENGINE_BUNDLE', path)
  vi.stubEnv('POLEWRIGHT_DATA_DIR', folder)
  const fresh = await import('../../../../server/calc')
  open = fresh
  return fresh
}
const program = (name: string, source: string) => {
  const path = join(folder, name)
  writeFileSync(path, source)
  return path
}

beforeAll(() => buildEngineProcess(ROOT, bundle), 60_000)
afterEach(() => {
  open?.closeCalc()
  vi.unstubAllEnvs()
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

describe('the engine\'s process', () => {
  it('gives the same bytes as the engine here, under the hash of its bundle, which is kept', async () => {
    const { computeSheet } = await calc(bundle)
    const [one, two] = await Promise.all([computeSheet(sheet, settings), computeSheet(sheet, settings)])
    const here = compute(sheet, settings)
    expect(one.recordedJson).toBe(here.recordedJson)
    expect(one.results).toEqual(here.results)
    expect(one.rows).toEqual(here.rows)
    expect(two).toEqual(one)
    const hash = createHash('sha256').update(readFileSync(bundle)).digest('hex')
    expect(one.engineHash).toBe(hash)
    expect(readFileSync(join(folder, 'engines', `${hash}.mjs`)).equals(readFileSync(bundle))).toBe(true)
    expect(one.responseProblems).toMatchObject([{ blockId: 'plot' }])
  })

  it('is the same file however often it is built', async () => {
    const again = join(folder, 'again.mjs')
    await buildEngineProcess(ROOT, again)
    expect(readFileSync(again).equals(readFileSync(bundle))).toBe(true)
  })

  it('is ended when a sheet takes too long, and the next sheet gets a new one', async () => {
    const stuck = program('stuck.mjs', `
      process.on('message', (question) => {
        if (question.document.content.length === 0) for (;;);
        process.send({ id: question.id, ok: true, computed: { recordedJson: String(process.pid) } })
      })`)
    const { computeSheet, ComputationOverrun } = await calc(stuck)
    const before = await computeSheet(sheet, settings)
    const overrun = computeSheet({ type: 'doc', content: [] }, settings, 200)
    const after = computeSheet(sheet, settings)
    await expect(overrun).rejects.toBeInstanceOf(ComputationOverrun)
    expect((await after).recordedJson).not.toBe(before.recordedJson)
    expect(() => process.kill(Number(before.recordedJson), 0)).toThrow('ESRCH')
  })

  it('that dies is reported as a sheet that asks for too much', async () => {
    const { computeSheet, ComputationOverrun } = await calc(program('dies.mjs', 'process.on(\'message\', () => process.exit(3))'))
    await expect(computeSheet(sheet, settings)).rejects.toBeInstanceOf(ComputationOverrun)
  })

  it('that fails on a sheet says so and goes on', async () => {
    const failing = program('fails.mjs', 'process.on(\'message\', ({ id }) => process.send({ id, ok: false, message: \'no such thing\' }))')
    const { computeSheet } = await calc(failing)
    await expect(computeSheet(sheet, settings)).rejects.toThrow('no such thing')
    await expect(computeSheet(sheet, settings)).rejects.toThrow('no such thing')
  })
})
