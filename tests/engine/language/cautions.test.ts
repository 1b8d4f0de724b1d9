/** Cautions, with the figures of data/safety.json (provenance beside each). */
import { describe, expect, it } from 'vitest'
import { createSheetEngine, sheetCautions } from '../../../shared/engine'
import type { CautionBlock } from '../../../shared/engine'
import { DANGEROUS_ENERGY, EXTRA_LOW_VOLTAGE, RESIDUAL } from '../../../shared/engine/cautions/figures'
import { bleeder } from '../../../shared/engine/cautions/numbers'
import data from '../data/safety.json'
import { inputOf, settings } from './support'

function figure(start: string): unknown {
  const record = data.records.find(found => found.quantity.startsWith(start))
  if (!record) throw new Error(`no figure ${start}`)
  return record.value
}

function cautions(lines: string[], ...blocks: CautionBlock[]) {
  const engine = createSheetEngine(settings)
  return sheetCautions(engine, engine.evaluate(inputOf(lines)), blocks)
}

describe('the figures', () => {
  it('are those of the sources', () => {
    expect(EXTRA_LOW_VOLTAGE.alternating).toBe(figure('ELV / SELV / PELV upper limit, AC'))
    expect(EXTRA_LOW_VOLTAGE.direct).toBe(figure('ELV / SELV / PELV upper limit, ripple-free'))
    expect(RESIDUAL.voltage).toBe(figure('machines: live parts'))
    expect(RESIDUAL.seconds).toBe(figure('machines: time to reach'))
    expect(RESIDUAL.charge * 1e6).toBeCloseTo(figure('machines: components exempt') as number, 9)
    expect(DANGEROUS_ENERGY).toBe(figure('stored energy taken as'))
  })

  it.each([[47e-6, 325, 'bleeder: largest R so that 47 uF at 325 V'], [4700e-6, 100, 'bleeder: largest R so that 4700 uF at 100 V']])('give the bleeder for %d F at %d V', (farads, volts, name) => {
    expect(Math.abs(bleeder(farads, volts) / (figure(name) as number) - 1)).toBeLessThan(1e-12)
  })
})

describe('switch-on', () => {
  const filter = ['L = 4.7 uH', 'C_1 = 10 uF', 'R = 0.3 ohm', 'V_s = 24 V', 'V_r = 35 V', 'H(s) = 1/(L*C_1*s^2 + R*C_1*s + 1)']

  it('says what the output reaches, and against which rating', () => {
    const [found] = cautions(filter, { blockId: 'b', transfer: 'H', supply: 'V_s', rating: '40 V' })
    expect(found).toMatchObject({ code: 'switch-on-overshoot', blockId: 'b' })
    expect(found?.message).toBe('At switch-on the output of H reaches 35.9 V from a 24 V supply (rated 40 V).')
  })

  it('says so where the rating is exceeded, at worst case too', () => {
    expect(cautions(filter, { blockId: 'b', transfer: 'H', supply: 'V_s', rating: 'V_r' })[0]).toMatchObject({ code: 'above-rating', message: expect.stringContaining('above its rating of 35 V') })
    expect(cautions(['V_t = 24 V ± 10 %', ...filter], { blockId: 'b', transfer: 'H', supply: 'V_t', rating: '38 V' })[0]).toMatchObject({ code: 'above-rating', message: expect.stringMatching(/at worst case 39\.5 V/) })
  })

  it('is silent without overshoot, supply or a voltage', () => {
    const rc = ['H(s) = 1/(1 + s*(1 ms))']
    expect(cautions(rc, { blockId: 'b', transfer: 'H', supply: '24 V', rating: '30 V' })).toEqual([])
    expect(cautions(filter, { blockId: 'b', transfer: 'H' })).toEqual([])
    expect(cautions(filter, { blockId: 'b', transfer: 'H', supply: '3 A' })).toEqual([])
    expect(cautions(filter, { blockId: 'b', transfer: 'G', supply: '24 V' })).toEqual([])
  })

  it('at a resonance without a settled step speaks of the resonance', () => {
    const [found] = cautions(['H(s) = (s/(1000 rad/s))^2/(1 + 0.2*s/(1000 rad/s) + (s/(1000 rad/s))^2)'], { blockId: 'b', transfer: 'H', supply: '10 V' })
    expect(found).toMatchObject({ code: 'resonance-rise', message: expect.stringMatching(/At its resonance \(16\d Hz\)/) })
  })
})

describe('voltages', () => {
  it('above extra-low voltage are named once, the highest', () => {
    const found = cautions(['V_b = 400 V', 'V_a = 60 V', 'V_c = 24 V'])
    expect(found).toHaveLength(1)
    expect(found[0]).toMatchObject({ code: 'above-extra-low-voltage', lineId: 'l1', message: expect.stringContaining('V_b is 400 V') })
  })

  it('count at their worst case, and ratings do not count', () => {
    expect(cautions(['V_a = 48 V ± 10 %'])[0]?.message).toContain('if it alternates')
    expect(cautions(['V_r = 63 V'], { blockId: 'b', transfer: 'H', rating: 'V_r' })).toEqual([])
  })
})

describe('stored energy', () => {
  const lines = ['C_b = 47 uF', 'R = 1 kohm', 'H(s) = 1/(1 + s*R*C_b)']

  it('at the supply of its transfer function', () => {
    expect(cautions(lines, { blockId: 'b', transfer: 'H', supply: '400 V' })).toEqual([
      expect.objectContaining({ code: 'stored-energy', lineId: 'l1', message: expect.stringContaining('C_b keeps 3.76 J at 400 V') }),
    ])
    expect(cautions(lines, { blockId: 'b', transfer: 'H', supply: '24 V' })).toEqual([])
  })

  it('is dangerous whatever the voltage from 10 J', () => {
    expect(cautions(['C_b = 100 mF', ...lines.slice(1)], { blockId: 'b', transfer: 'H', supply: '24 V' })[0]?.message).toContain('discharge it before touching it')
  })
})
