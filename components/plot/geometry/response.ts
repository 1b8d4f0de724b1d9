/**
 * The drawing of a frequency response: magnitude above phase on semi-logarithmic paper.
 * From figures to lines and places; the component only sets them.
 */
import { scaleLinear, scaleLog } from 'd3-scale'
import { area, line } from 'd3-shape'
import type { ResponseFigures, ResponseMark } from '#shared/engine/types'
import { asymptoteStretches, type Stretch } from './asymptotes'
import { gainAxis, logRulings, phaseAxis, type Ruling } from './axes'
import { drawnBarriers, type DrawnBarrier, type LabelledBarrier } from './barriers'
import { plainNumber, withMinus } from './numbers'
import { placeLabels, type Box, type LabelRequest, type PlacedLabel, type Point } from './placer'

export interface ResponseOptions {
  /** Width of the drawing, px. */
  width: number
  showPhase: boolean
  showAsymptotes: boolean
  barriers: readonly LabelledBarrier[]
}

export interface Ruled { at: number, ruling: Ruling }
export interface BarrierDrawing extends Box { name: string, edgeY: number }
export interface MarkDrawing { kind: ResponseMark['kind'], at: Point }

const LEFT = 50
const RIGHT = 16
const TOP = 10
const GAP = 22
const BOTTOM = 26
const BARRIER = 14
const NARROWEST_BARRIER = 26

/** Panels of the drawing, px. Narrow screens keep a height that can still be read. */
export function panels(width: number, showPhase: boolean) {
  const height = Math.round(Math.min(290, Math.max(190, width * 0.42)))
  const gain: Box = { x: LEFT, y: TOP, width: width - LEFT - RIGHT, height }
  const phase: Box | null = showPhase ? { ...gain, y: TOP + height + GAP, height: Math.round(height * 0.44) } : null
  const foot = phase ?? gain
  return { gain, phase, height: foot.y + foot.height + BOTTOM }
}

/** Gains that the paper must hold: the curve, its band and the edges of the barriers. */
function gainsToShow(figures: ResponseFigures, barriers: readonly DrawnBarrier[]): number[] {
  const { gain, gainLow = [], gainHigh = [] } = figures.curve
  return [...gain, ...gainLow, ...gainHigh, ...barriers.flatMap(one => [one.edge, one.edge + (one.side === 'above' ? 2 : -2)])]
}

function scalesOf(figures: ResponseFigures, options: ResponseOptions, barriers: readonly DrawnBarrier[]) {
  const boxes = panels(options.width, options.showPhase)
  const { frequency, phase } = figures.curve
  const range = { from: frequency[0] ?? 1, to: frequency[frequency.length - 1] ?? 10 }
  const gain = gainAxis(gainsToShow(figures, barriers))
  const angle = phaseAxis(phase)
  const x = scaleLog([range.from, range.to], [boxes.gain.x, boxes.gain.x + boxes.gain.width])
  const y = scaleLinear([gain.range.from, gain.range.to], [boxes.gain.y + boxes.gain.height, boxes.gain.y])
  const yPhase = boxes.phase && scaleLinear([angle.range.from, angle.range.to], [boxes.phase.y + boxes.phase.height, boxes.phase.y])
  return { boxes, range, gain, angle, x, y, yPhase }
}
type Scales = ReturnType<typeof scalesOf>

function barrierDrawing(barrier: DrawnBarrier, { x, y, boxes, range }: Scales): BarrierDrawing | null {
  const box = boxes.gain
  if (barrier.to < range.from || barrier.from > range.to) return null
  let [left, right] = [x(Math.max(barrier.from, range.from)), x(Math.min(barrier.to, range.to))]
  if (right - left < NARROWEST_BARRIER) {
    const middle = (left + right) / 2
    left = Math.max(box.x, middle - NARROWEST_BARRIER / 2)
    right = Math.min(box.x + box.width, middle + NARROWEST_BARRIER / 2)
  }
  const edgeY = y(barrier.edge)
  const top = Math.max(box.y, barrier.side === 'above' ? edgeY - BARRIER : edgeY)
  const bottom = Math.min(box.y + box.height, barrier.side === 'above' ? edgeY : edgeY + BARRIER)
  return { name: barrier.name, x: left, y: top, width: right - left, height: Math.max(0, bottom - top), edgeY }
}

function markText(mark: ResponseMark): string {
  const at = `${mark.shown.text} ${mark.shown.unit}`
  const gain = `${mark.shownGain.text} ${mark.shownGain.unit}`
  if (mark.kind === 'peak') return `peak ${gain} at ${at}`
  return mark.kind === 'corner' ? `corner ${at}` : `cut-off ${at}, ${gain}`
}

const slopeText = (slope: number) => `${withMinus(plainNumber(slope))} dB/decade`

function labelRequests(figures: ResponseFigures, stretches: readonly Stretch[], barriers: readonly { drawn: DrawnBarrier, drawing: BarrierDrawing }[], { x, y }: Scales): LabelRequest[] {
  const marks = figures.marks.map((mark, index): LabelRequest => ({
    id: `mark-${index}`,
    text: markText(mark),
    anchor: { x: x(mark.frequency), y: y(mark.gain) },
    prefer: mark.kind === 'cut-off' ? -135 : mark.kind === 'peak' ? 110 : 20,
  }))
  const limits = barriers.map(({ drawn, drawing }, index): LabelRequest => ({
    id: `barrier-${index}`,
    text: drawn.text,
    anchor: { x: drawing.x + drawing.width / 2, y: drawn.side === 'above' ? drawing.y : drawing.y + drawing.height },
    prefer: drawn.side === 'above' ? 90 : -90,
    loose: true,
  }))
  const slopes = stretches.filter(one => one.slope !== 0).map((stretch, index): LabelRequest => ({
    id: `slope-${index}`,
    text: slopeText(stretch.slope),
    anchor: { x: (x(stretch.from.frequency) + x(stretch.to.frequency)) / 2, y: (y(stretch.from.gain) + y(stretch.to.gain)) / 2 },
    prefer: 20,
    loose: true,
  }))
  return [...marks, ...limits, ...slopes]
}

/** Points of the gain curve on the paper, thinned to one a pixel, as obstacles for labels. */
function curvePoints(figures: ResponseFigures, { x, y, boxes }: Scales): Point[] {
  const { frequency, gain } = figures.curve
  const floor = boxes.gain.y + boxes.gain.height
  return frequency.map((one, index) => ({ x: x(one), y: Math.min(floor + 40, Number.isFinite(gain[index]) ? y(gain[index]!) : floor + 40) }))
}

function paths(figures: ResponseFigures, { x, y, yPhase }: Scales) {
  const { frequency, gain, phase, gainLow, gainHigh } = figures.curve
  const draw = (values: readonly number[], scale: (value: number) => number) =>
    line<number>().defined((_, i) => Number.isFinite(values[i])).x((_, i) => x(frequency[i]!)).y((_, i) => scale(values[i]!))(frequency) ?? ''
  const band = gainLow && gainHigh
    ? area<number>().defined((_, i) => Number.isFinite(gainLow[i]) && Number.isFinite(gainHigh[i])).x((_, i) => x(frequency[i]!)).y0((_, i) => y(gainLow[i]!)).y1((_, i) => y(gainHigh[i]!))(frequency)
    : null
  return { gain: draw(gain, y), phase: yPhase ? draw(phase, yPhase) : null, band }
}

/** Everything that the component sets, in px. */
export function responseDrawing(figures: ResponseFigures, options: ResponseOptions) {
  const limits = drawnBarriers(options.barriers, figures.asymptotes, figures.curve)
  const scales = scalesOf(figures, options, limits)
  const { x, y, yPhase, boxes } = scales
  const barriers = limits.map(drawn => ({ drawn, drawing: barrierDrawing(drawn, scales) }))
    .filter((one): one is { drawn: DrawnBarrier, drawing: BarrierDrawing } => one.drawing !== null)
  const stretches = options.showAsymptotes ? asymptoteStretches(figures.asymptotes, scales.range, scales.gain.range) : []
  const lines = stretches.map(one => [{ x: x(one.from.frequency), y: y(one.from.gain) }, { x: x(one.to.frequency), y: y(one.to.gain) }] as const)
  const marks: MarkDrawing[] = figures.marks.map(mark => ({ kind: mark.kind, at: { x: x(mark.frequency), y: y(mark.gain) } }))
  const around = marks.map(({ at }): Box => ({ x: at.x - 5, y: at.y - 5, width: 10, height: 10 }))
  const labels: { placed: PlacedLabel[], unplaced: LabelRequest[] } = placeLabels(labelRequests(figures, stretches, barriers, scales), {
    bounds: boxes.gain,
    curves: [curvePoints(figures, scales), ...lines],
    boxes: [...barriers.map(one => one.drawing), ...around],
  })
  return {
    boxes,
    width: options.width,
    height: boxes.height,
    frequencyRulings: logRulings(scales.range.from, scales.range.to).map((ruling): Ruled => ({ at: x(ruling.value), ruling })),
    gainRulings: scales.gain.rulings.map((ruling): Ruled => ({ at: y(ruling.value), ruling })),
    phaseRulings: yPhase ? scales.angle.rulings.map((ruling): Ruled => ({ at: yPhase(ruling.value), ruling })) : [],
    paths: paths(figures, scales),
    asymptotes: lines,
    barriers: barriers.map(one => one.drawing),
    marks,
    labels,
    at: (frequency: number, gain: number, phase: number) => ({ x: x(frequency), gainY: y(gain), phaseY: yPhase ? yPhase(phase) : null }),
    frequencyAt: (pixel: number) => x.invert(pixel),
  }
}
export type ResponseDrawing = ReturnType<typeof responseDrawing>

/** Index of the point of the curve nearest in ratio to `frequency`. */
export function nearestIndex(frequencies: readonly number[], frequency: number): number {
  let best = 0
  frequencies.forEach((one, index) => {
    if (Math.abs(Math.log(one / frequency)) < Math.abs(Math.log(frequencies[best]! / frequency))) best = index
  })
  return best
}
