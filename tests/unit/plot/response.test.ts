import { describe, expect, it } from 'vitest'
import { asymptoteStretches, meeting } from '../../../components/plot/geometry/asymptotes'
import { drawnBarriers } from '../../../components/plot/geometry/barriers'
import { nearestIndex, responseDrawing } from '../../../components/plot/geometry/response'
import { segmentHits, type Box, type PlacedLabel } from '../../../components/plot/geometry/placer'
import { stepDrawing } from '../../../components/plot/geometry/step'
import { lowPass, lowPassStep } from './second-order'

const CORNER = 23.22e3
const barriers = [
  { name: 'Req 1', barrier: { transfer: 'H', quantity: 'gain', sense: 'at most', limit: 6, from: 1e3, to: 60e3 } },
  { name: 'Req 2', barrier: { transfer: 'H', quantity: 'attenuation', sense: 'at least', limit: 30, from: 150e3, to: 150e3 } },
] as const
const boxesMeet = (a: Box, b: Box) => a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height

/** The points of an SVG path of straight lines. */
const pointsOf = (path: string) => [...path.matchAll(/[ML]?(-?[\d.]+),(-?[\d.]+)/g)].map(([, x, y]) => ({ x: Number(x), y: Number(y) }))

function checkLabels(labels: readonly PlacedLabel[], bounds: Box, path: string) {
  const points = pointsOf(path)
  expect(points.length).toBeGreaterThan(50)
  labels.forEach((label, at) => {
    expect(label.box.x).toBeGreaterThanOrEqual(bounds.x)
    expect(label.box.x + label.box.width).toBeLessThanOrEqual(bounds.x + bounds.width)
    expect(label.box.y).toBeGreaterThanOrEqual(bounds.y)
    expect(label.box.y + label.box.height).toBeLessThanOrEqual(bounds.y + bounds.height)
    for (const other of labels.slice(at + 1)) expect(boxesMeet(label.box, other.box), `${label.text} / ${other.text}`).toBe(false)
    for (let i = 1; i < points.length; i++) expect(segmentHits(points[i - 1]!, points[i]!, label.box), `${label.text} over the curve`).toBe(false)
  })
}

describe('labels of a response', () => {
  for (const width of [300, 390, 640, 760]) {
    for (const zeta of [0.02, 0.1, 0.35, 0.544, 0.7, 1, 3]) {
      it(`never cover a curve or each other: ${width} px, damping ${zeta}`, () => {
        const drawing = responseDrawing(lowPass(zeta, CORNER, 1e3, 1e6), { width, showPhase: true, showAsymptotes: true, barriers })
        checkLabels(drawing.labels.placed, drawing.boxes.gain, drawing.paths.gain)
        for (const label of drawing.labels.placed) {
          for (const barrier of drawing.barriers) expect(boxesMeet(label.box, barrier)).toBe(false)
        }
        expect(drawing.labels.placed.length + drawing.labels.unplaced.length).toBe(lowPass(zeta, CORNER, 1e3, 1e6).marks.length + 3)
      })
    }
  }

  it('find room for all of them at the width of a sheet', () => {
    const drawing = responseDrawing(lowPass(0.35, CORNER, 1e3, 1e6), { width: 640, showPhase: true, showAsymptotes: true, barriers })
    expect(drawing.labels.unplaced).toEqual([])
    expect(drawing.labels.placed.map(one => one.text)).toContain('Req 2 · attenuation at least 30 dB at 150 kHz')
    expect(drawing.labels.placed.map(one => one.text)).toContain('−40 dB/decade')
  })
})

describe('the drawing', () => {
  const drawing = responseDrawing(lowPass(0.5, CORNER, 1e3, 1e6), { width: 640, showPhase: true, showAsymptotes: true, barriers })

  it('lets the asymptotes meet at the corner', () => {
    const [low, high] = drawing.asymptotes
    expect(low![1].x).toBeCloseTo(drawing.at(CORNER, 0, 0).x, 6)
    expect(high![0]).toEqual(low![1])
  })

  it('puts a tenfold frequency at the same distance everywhere', () => {
    const x = (frequency: number) => drawing.at(frequency, 0, 0).x
    expect(x(1e4) - x(1e3)).toBeCloseTo(x(1e6) - x(1e5), 9)
  })

  it('reads back the frequency under a place', () => {
    expect(drawing.frequencyAt(drawing.at(47e3, 0, 0).x)).toBeCloseTo(47e3, 3)
  })

  it('draws no phase panel when it is not wanted', () => {
    const plain = responseDrawing(lowPass(0.5, CORNER, 1e3, 1e6), { width: 640, showPhase: false, showAsymptotes: false, barriers: [] })
    expect(plain.paths.phase).toBeNull()
    expect(plain.height).toBeLessThan(drawing.height)
  })

  it('breaks the curve where a gain is not finite', () => {
    const figures = lowPass(0.5, CORNER, 1e3, 1e6)
    figures.curve.gain[100] = Number.NEGATIVE_INFINITY
    const { paths } = responseDrawing(figures, { width: 640, showPhase: true, showAsymptotes: false, barriers: [] })
    expect(paths.gain.match(/M/g)).toHaveLength(2)
    expect(paths.gain).not.toContain('NaN')
  })
})

describe('barriers', () => {
  const figures = lowPass(0.5, CORNER, 1e3, 1e6)
  const at = (quantity: 'gain' | 'attenuation', sense: 'at least' | 'at most', limit: number) =>
    drawnBarriers([{ name: 'Req', barrier: { transfer: 'H', quantity, sense, limit, from: 1e4, to: 1e4 } }], figures.asymptotes, figures.curve)[0]!

  it('stand on the forbidden side', () => {
    expect(at('gain', 'at most', 6)).toMatchObject({ edge: 6, side: 'above' })
    expect(at('gain', 'at least', -1)).toMatchObject({ edge: -1, side: 'below' })
    expect(at('attenuation', 'at least', 30)).toMatchObject({ edge: -30, side: 'above' })
    expect(at('attenuation', 'at most', 1)).toMatchObject({ edge: -1, side: 'below' })
  })

  it('count attenuation from the passband', () => {
    const raised = { ...figures, asymptotes: [{ side: 'low' as const, slope: 0, gainAtOneHertz: 20 }] }
    expect(drawnBarriers([barriers[1]], raised.asymptotes, raised.curve)[0]!.edge).toBe(-10)
  })

  it('out of the range of frequency are not drawn', () => {
    const far = { name: 'Req', barrier: { ...barriers[0].barrier, from: 5e6, to: 6e6 } }
    expect(responseDrawing(figures, { width: 640, showPhase: false, showAsymptotes: false, barriers: [far] }).barriers).toEqual([])
  })
})

describe('asymptotes', () => {
  it('of equal slope do not meet', () => {
    expect(meeting({ side: 'low', slope: -20, gainAtOneHertz: 0 }, { side: 'high', slope: -20, gainAtOneHertz: 6 })).toBeNull()
  })
  it('end at the edge of the paper', () => {
    const [only] = asymptoteStretches([{ side: 'high', slope: -40, gainAtOneHertz: 160 }], { from: 1e3, to: 1e6 }, { from: -40, to: 10 })
    expect(only!.to.gain).toBeCloseTo(-40, 9)
    expect(only!.from.gain).toBeCloseTo(10, 9)
  })
})

describe('step response', () => {
  for (const width of [300, 640]) {
    for (const zeta of [0.05, 0.2, 0.5, 0.9]) {
      it(`labels stay clear: ${width} px, damping ${zeta}`, () => {
        const drawing = stepDrawing(lowPassStep(zeta, CORNER), width)
        checkLabels(drawing.labels.placed, drawing.box, drawing.path)
      })
    }
  }
  it('rules no line beyond the end of time', () => {
    const figures = lowPassStep(0.3, CORNER)
    const drawing = stepDrawing(figures, 640)
    expect(Math.max(...drawing.timeRulings.map(one => one.at))).toBeLessThanOrEqual(drawing.box.x + drawing.box.width + 1e-6)
  })
})

describe('reading off', () => {
  it('takes the point nearest in ratio', () => {
    expect(nearestIndex([10, 100, 1000], 40)).toBe(1)
    expect(nearestIndex([10, 100, 1000], 30)).toBe(0)
  })
})
