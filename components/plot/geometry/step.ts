/** The drawing of a step response: value over time on squared paper. From figures to lines and places. */
import { scaleLinear } from 'd3-scale'
import { line } from 'd3-shape'
import type { StepFigures } from '#shared/engine/types'
import { linearAxis } from './axes'
import { engineering, withMinus } from './numbers'
import { placeLabels, type Box, type LabelRequest, type Point } from './placer'
import type { Ruled } from './response'

const LEFT = 50
const RIGHT = 16
const TOP = 10
const BOTTOM = 26

const written = (value: number, step: number) => withMinus(value.toFixed(Math.max(0, Math.min(6, -Math.floor(Math.log10(step) + 1e-9)))))
const shownText = (shown: { text: string, unit: string }) => `${shown.text} ${shown.unit}`.trim()

function requests(figures: StepFigures, x: (time: number) => number, y: (value: number) => number): LabelRequest[] {
  const { peak, settling, finalValue } = figures
  const list: LabelRequest[] = []
  if (peak) list.push({ id: 'peak', text: `overshoot ${shownText(peak.shown)} at ${shownText(peak.shownTime)}`, anchor: { x: x(peak.time), y: y(peak.value) }, prefer: 25 })
  if (settling && finalValue !== undefined) {
    list.push({ id: 'settling', text: `settled to ±${written(settling.band * 100, 1)} % after ${shownText(settling.shown)}`, anchor: { x: x(settling.time), y: y(finalValue * (1 - settling.band)) }, prefer: -70 })
  }
  return list
}

/** Everything that the component sets, in px. */
export function stepDrawing(figures: StepFigures, width: number) {
  const box: Box = { x: LEFT, y: TOP, width: width - LEFT - RIGHT, height: Math.round(Math.min(240, Math.max(170, width * 0.34))) }
  const { time, value, finalValue, peak, settling } = figures
  const finite = value.filter(Number.isFinite)
  const reach = [...finite, 0, ...(finalValue === undefined ? [] : [finalValue])]
  const [low, high] = [Math.min(...reach), Math.max(...reach)]
  const air = (high - low || 1) * 0.08
  const end = time[time.length - 1] ?? 1
  const levels = linearAxis(low < 0 ? low - air : 0, high + air, 6, written)
  const times = linearAxis(time[0] ?? 0, end, 8, one => engineering(one, 's', 3))
  const x = scaleLinear([time[0] ?? 0, end], [box.x, box.x + box.width])
  const y = scaleLinear([levels.range.from, levels.range.to], [box.y + box.height, box.y])
  const points: Point[] = time.map((one, index) => ({ x: x(one), y: y(value[index] ?? 0) }))
  const path = line<Point>().x(point => point.x).y(point => point.y)(points) ?? ''
  const final = finalValue === undefined ? null : y(finalValue)
  const band = settling && finalValue !== undefined
    ? [y(finalValue * (1 + settling.band)), y(finalValue * (1 - settling.band))].sort((a, b) => a - b) as [number, number]
    : null
  const marks: Point[] = [
    ...(peak ? [{ x: x(peak.time), y: y(peak.value) }] : []),
    ...(settling && final !== null ? [{ x: x(settling.time), y: final }] : []),
  ]
  const finalLine = final === null ? [] : [[{ x: box.x, y: final }, { x: box.x + box.width, y: final }]]
  const labels = placeLabels(requests(figures, x, y), {
    bounds: box,
    curves: [points, ...finalLine],
    boxes: marks.map(at => ({ x: at.x - 5, y: at.y - 5, width: 10, height: 10 })),
  })
  return {
    box,
    width,
    height: box.y + box.height + BOTTOM,
    timeRulings: times.rulings.filter(ruling => ruling.value <= end * (1 + 1e-9)).map((ruling): Ruled => ({ at: x(ruling.value), ruling: { ...ruling, major: false } })),
    levelRulings: levels.rulings.map((ruling): Ruled => ({ at: y(ruling.value), ruling })),
    path,
    final,
    band,
    peakAt: peak ? marks[0]! : null,
    settledAt: settling && final !== null ? { x: x(settling.time), y: final } : null,
    labels,
    at: (one: number, level: number): Point => ({ x: x(one), y: y(level) }),
    timeAt: (pixel: number) => x.invert(pixel),
  }
}
