import { describe, expect, it } from 'vitest'
import { labelWidth, placeLabels, segmentHits } from '../../../components/plot/geometry/placer'

describe('the width of a label', () => {
  // Drawn widths in px at 12 px: measured with measureText in Chromium, Barlow 500 of @fontsource/barlow 5.3.0.
  it.each([
    ['Req 1 · attenuation at least 28 dB at 150 kHz', 222.7],
    ['peak 4.22 dB at 9.668 kHz', 133],
    ['cut-off 29.80 kHz, −3.01 dB', 138.6],
    ['−40 dB/decade', 79.1],
    ['Req 12 · gain at most 6 dB 1 kHz to 60 kHz', 209.5],
    ['settled to ±2 % after 80.12 µs', 150.1],
  ])('%s: not less than drawn, and not much more', (text, drawn) => {
    expect(labelWidth(text)).toBeGreaterThanOrEqual(drawn)
    expect(labelWidth(text)).toBeLessThan(drawn * 1.1)
  })
})

describe('placing labels', () => {
  const bounds = { x: 0, y: 0, width: 300, height: 100 }
  it('hands back what finds no room', () => {
    const { placed, unplaced } = placeLabels([{ id: 'a', text: 'a label that is far too long for this little drawing, in any direction', anchor: { x: 150, y: 50 } }], { bounds, curves: [], boxes: [] })
    expect(placed).toEqual([])
    expect(unplaced.map(one => one.id)).toEqual(['a'])
  })
  it('leads to a point that is apart', () => {
    const wall = { x: 100, y: 20, width: 100, height: 60 }
    const { placed } = placeLabels([{ id: 'a', text: 'peak', anchor: { x: 150, y: 50 } }], { bounds, curves: [], boxes: [wall] })
    expect(placed[0]!.leader).not.toBeNull()
  })
})

describe('a segment and a box', () => {
  const box = { x: 10, y: 10, width: 10, height: 10 }
  it.each([
    [{ x: 0, y: 15 }, { x: 30, y: 15 }, true],
    [{ x: 12, y: 12 }, { x: 13, y: 13 }, true],
    [{ x: 0, y: 0 }, { x: 30, y: 9 }, false],
    [{ x: 0, y: 30 }, { x: 9, y: 0 }, false],
    [{ x: 15, y: 0 }, { x: 15, y: 5 }, false],
  ])('from %o to %o', (a, b, hits) => expect(segmentHits(a, b, box)).toBe(hits))
})
