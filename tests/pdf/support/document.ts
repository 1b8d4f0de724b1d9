import type { LineNode, SheetBlock, SheetDocument } from '../../../shared/document/types'

const line = (id: string, source: string, reference = '', status: LineNode['attrs']['status'] = null): LineNode => ({
  type: 'line',
  attrs: { id, status },
  content: [
    { type: 'source', content: [{ type: 'text', text: source }] },
    ...(reference ? [{ type: 'reference' as const, content: [{ type: 'text' as const, text: reference }] }] : []),
  ],
})

const paragraph = (id: string, text: string): SheetBlock => ({ type: 'paragraph', attrs: { id, reference: '' }, content: [{ type: 'text', text }] })

/**
 * An input filter with a damping leg, long enough for several pages. Invented values; its figures are the engine's own.
 * `load` in ohm, so that two revisions differ in one line and in what depends on it.
 */
export function inputFilter(load = 5): SheetDocument {
  const remarks = Array.from({ length: 12 }, (_, at) => paragraph(`note-${at}`, `Note ${at + 1}. The damping leg takes the peak off the filter; its capacitor carries no current at the line’s frequency, and its resistor is rated for the ripple alone.`))
  return {
    type: 'doc',
    content: [
      { type: 'heading', attrs: { id: 'head', reference: '', level: 1 }, content: [{ type: 'text', text: '1 Parts' }] },
      { type: 'calculation', attrs: { id: 'parts', reference: '' }, content: [
        line('line-l', 'L_1 = 4.7 uH ± 20 %', 'Maker’s data', 'given'),
        line('line-c', 'C_1 = 10 uF ± 10 %', 'Maker’s data', 'given'),
        line('line-cd', 'C_d = 47 uF', 'Maker’s data', 'given'),
        line('line-rd', 'R_d = 0.68 ohm', 'nearest of E24', 'assumed'),
        line('line-r', `R_L = ${load} ohm`, 'Client specification 4.2', 'given'),
      ] },
      { type: 'calculation', attrs: { id: 'corner', reference: '' }, content: [
        line('line-f', 'f_0 = 1/(2*pi*sqrt(L_1*C_1)) to kHz'),
        line('line-h', 'H(s) = 1/(1 + s*L_1*(s*C_1 + s*C_d/(1 + s*R_d*C_d)/s*s + 1/R_L))'),
      ] },
      { type: 'response', attrs: {
        id: 'response', reference: '', transfer: 'H', from: '1 kHz', to: '1 MHz', showPhase: true, showStep: true, showAsymptotes: true,
        duration: '', supply: '24 V', rating: '35 V', caption: 'Supply to load',
      } },
      { type: 'requirements', attrs: { id: 'requirements', reference: '' }, content: [
        line('req-1', 'attenuation(H, 150 kHz) >= 25 dB # attenuation at 150 kHz', 'Client specification 4.1'),
      ] },
      ...remarks,
    ],
  }
}
