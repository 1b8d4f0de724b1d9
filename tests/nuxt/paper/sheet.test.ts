import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import PaperSheet from '~/components/paper/Sheet.vue'
import type { LineNode, SheetDocument, TextMark } from '#shared/document/types'
import type { LineResult, SheetResult, Shown } from '#shared/engine/types'

const shown = (text: string, unit: string): Shown => ({ text, unit, latex: text })
const line = (id: string, source: string, reference = '', status: LineNode['attrs']['status'] = null): LineNode => ({
  type: 'line',
  attrs: { id, status },
  content: [{ type: 'source', content: [{ type: 'text', text: source }] }, ...(reference ? [{ type: 'reference' as const, content: [{ type: 'text' as const, text: reference }] }] : [])],
})
const result = (id: string, changes: Partial<LineResult>): LineResult => ({ id, status: 'ok', kind: 'value', problems: [], uses: [], typeset: {}, ...changes })
const paragraph = (id: string, text: string, marks?: TextMark[]): SheetDocument['content'][number] => ({ type: 'paragraph', attrs: { id, reference: '' }, content: [{ type: 'text', text, marks }] })

const document: SheetDocument = { type: 'doc', content: [
  { type: 'heading', attrs: { id: 'h', reference: '', level: 2 }, content: [{ type: 'text', text: 'Inputs' }] },
  { type: 'calculation', attrs: { id: 'c', reference: '' }, content: [
    line('l1', 'L_1 = 4.7 uH +- 20 %', 'Maker’s data', 'assumed'),
    line('l2', 'V_1 + I_1'),
    line('l3', 'attenuation(H, 150 kHz) >= 30 dB', 'clause 4.2'),
  ] },
  paragraph('p1', '<img src=x onerror=alert(1)>'),
  paragraph('p2', 'safe', [{ type: 'link', attrs: { href: 'https://example.org/a' } }]),
  paragraph('p3', 'unsafe', [{ type: 'link', attrs: { href: 'JavaScript:alert(1)' } }]),
  { type: 'figure', attrs: { id: 'f', reference: '', attachment: 'https://elsewhere.example/x.png', caption: '', alt: '' } },
] }
const results: SheetResult = { lines: [
  result('l1', {
    value: { type: 'number', si: 4.7e-6, dimension: [0, 0, 0, 0, 0, 0, 0], shown: shown('4.700', 'µH'), bounds: { low: 0, high: 1, shownLow: shown('3.760', 'µH'), shownHigh: shown('5.640', 'µH'), method: 'searched' } },
    typeset: { formula: 'L_1 = 4.7' },
  }),
  result('l2', { status: 'error', kind: 'error', problems: [{ code: 'dimension-mismatch', severity: 'error', message: 'Volts and amperes cannot be added.', hint: 'Multiply by a resistance.' }] }),
  result('l3', { kind: 'requirement', requirement: { verdict: 'not met at worst case', margin: shown('-0.37', 'dB'), marginSi: -1, nominalMargin: shown('2.36', 'dB'), nominalMarginSi: 1, subject: 'attenuation', untoleranced: [] } }),
] }
const mount = () => mountSuspended(PaperSheet, { props: { document, results }, slots: { tick: ({ id, kind }: { id: string, kind: string }) => `tick ${kind} ${id}` } })

describe('a frozen sheet', () => {
  it('sets a line in its three columns', async () => {
    const row = (await mount()).get('#row-l1')
    expect(row.get('.row-reference').text()).toMatch(/Maker’s data\s*assumed/)
    expect(row.get('.line-source').text()).toBe('L_1 = 4.7 uH +- 20 %')
    expect(row.get('.row-output').text().replace(/\s+/g, ' ')).toBe('4.700 µH3.760 … 5.640')
    expect(row.get('.out-bounds').attributes('data-method')).toBe('searched')
    expect(row.find('math').exists()).toBe(true)
  })

  it('shows an error at its line, with the way to mend it and no result', async () => {
    const row = (await mount()).get('#row-l2')
    expect(row.get('.line-problem').text()).toContain('Volts and amperes cannot be added.')
    expect(row.get('.line-problem-hint').text()).toBe('Multiply by a resistance.')
    expect(row.get('.row-output').text()).toBe('')
  })

  it('says the verdict in words, worst case first', async () => {
    const row = (await mount()).get('#row-l3')
    expect(row.get('.row-tag').text()).toBe('Req 1')
    expect(row.get('.verdict').text()).toBe('not met at worst case')
    expect(row.findAll('.out-detail').map(one => one.text())).toEqual(['margin -0.37 dB', 'nominal 2.36 dB'])
  })

  it('gives each row its slots, with its id and kind', async () => {
    const sheet = await mount()
    expect(sheet.get('#row-l2 .row-tick').text()).toBe('tick line l2')
    expect(sheet.get('#row-p1 .row-tick').text()).toBe('tick block p1')
  })

  it('turns nothing of the document into markup', async () => {
    const sheet = await mount()
    expect(sheet.find('#row-p1 img').exists()).toBe(false)
    expect(sheet.get('#row-p1').text()).toContain('<img src=x onerror=alert(1)>')
    expect(sheet.get('#row-p2 a').attributes()).toMatchObject({ href: 'https://example.org/a', rel: 'noopener noreferrer' })
    expect(sheet.find('#row-p3 a').exists()).toBe(false)
    expect(sheet.find('#row-f img').exists()).toBe(false)
  })

  it('keeps the order of headings below the title of the page', async () => {
    expect((await mount()).get('#row-h h3').text()).toBe('Inputs')
  })
})
