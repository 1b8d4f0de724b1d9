/**
 * Where labels go on a plot: as near to their points as they can, never over a curve, a barrier, each other or the edge.
 * A label for which there is no room at all is handed back, to be written beside the plot.
 */
export interface Point { x: number, y: number }
export interface Box { x: number, y: number, width: number, height: number }
export type Polyline = readonly Point[]

export interface LabelRequest {
  id: string
  text: string
  anchor: Point
  /** Which way to look first, in degrees: 0 right, 90 up. */
  prefer?: number
  /** Sits on a line rather than at a point: a leader would say nothing. */
  loose?: boolean
}
export interface PlacedLabel {
  id: string
  text: string
  box: Box
  /** Baseline start of the text. */
  at: Point
  /** From the point to the label, where they are apart. */
  leader: readonly [Point, Point] | null
}
export interface Obstacles { bounds: Box, curves: readonly Polyline[], boxes: readonly Box[] }

const FONT = 12
const HEIGHT = 15
const CLEAR = 3
const LEADER_FROM = 22
const DISTANCES = [6, 10, 16, 24, 34, 46, 62, 80, 102, 128, 160]
const DIRECTIONS = 24

/** Mean advances of Barlow 500 in em by kind of letter, with a little to spare. */
const ADVANCES: readonly [RegExp, number][] = [
  [/[ ilj.,:·'|]/, 0.25], [/[tfr()/-]/, 0.35], [/[mwMWµ−–±]/, 0.76], [/[A-Z0-9%]/, 0.56],
]
const USUAL_ADVANCE = 0.5

/** Width of a label, px: never less than it is drawn. */
export const labelWidth = (text: string) =>
  Math.ceil([...text].reduce((sum, letter) => sum + (ADVANCES.find(([letters]) => letters.test(letter))?.[1] ?? USUAL_ADVANCE), 0) * FONT) + 2

const overlaps = (a: Box, b: Box, clear: number) =>
  a.x < b.x + b.width + clear && b.x < a.x + a.width + clear && a.y < b.y + b.height + clear && b.y < a.y + a.height + clear
const within = (inner: Box, outer: Box) =>
  inner.x >= outer.x && inner.y >= outer.y && inner.x + inner.width <= outer.x + outer.width && inner.y + inner.height <= outer.y + outer.height

/** Whether the segment a–b touches the box (Liang and Barsky, 1984). */
export function segmentHits(a: Point, b: Point, box: Box): boolean {
  let enter = 0
  let leave = 1
  const dx = b.x - a.x
  const dy = b.y - a.y
  const sides: [number, number][] = [
    [-dx, a.x - box.x], [dx, box.x + box.width - a.x], [-dy, a.y - box.y], [dy, box.y + box.height - a.y],
  ]
  for (const [p, q] of sides) {
    if (p === 0 && q < 0) return false
    if (p === 0) continue
    const t = q / p
    if (p < 0) enter = Math.max(enter, t)
    else leave = Math.min(leave, t)
    if (enter > leave) return false
  }
  return true
}

const grown = (box: Box, by: number): Box => ({ x: box.x - by, y: box.y - by, width: box.width + 2 * by, height: box.height + 2 * by })

function crossesCurve(box: Box, curves: readonly Polyline[]): boolean {
  const clear = grown(box, CLEAR)
  return curves.some(curve => curve.some((point, index) => index > 0 && segmentHits(curve[index - 1]!, point, clear)))
}

/** Boxes around the anchor, nearest first; at each distance the preferred direction first. */
function* candidates(request: LabelRequest): Generator<{ box: Box, distance: number }> {
  const width = labelWidth(request.text)
  const first = request.prefer ?? 60
  for (const distance of DISTANCES) {
    for (let turn = 0; turn < DIRECTIONS; turn++) {
      const side = turn % 2 === 0 ? turn / 2 : -(turn + 1) / 2
      const angle = (first + side * (360 / DIRECTIONS)) * Math.PI / 180
      const toward = { x: Math.cos(angle), y: -Math.sin(angle) }
      const centre = {
        x: request.anchor.x + toward.x * (distance + width / 2),
        y: request.anchor.y + toward.y * (distance + HEIGHT / 2),
      }
      yield { box: { x: centre.x - width / 2, y: centre.y - HEIGHT / 2, width, height: HEIGHT }, distance }
    }
  }
}

function leaderOf(anchor: Point, box: Box): readonly [Point, Point] {
  const end = {
    x: Math.min(Math.max(anchor.x, box.x), box.x + box.width),
    y: Math.min(Math.max(anchor.y, box.y), box.y + box.height),
  }
  return [anchor, end]
}

function place(request: LabelRequest, obstacles: Obstacles, taken: readonly Box[]): PlacedLabel | null {
  for (const { box, distance } of candidates(request)) {
    if (!within(box, obstacles.bounds) || taken.some(other => overlaps(box, other, CLEAR))) continue
    if (obstacles.boxes.some(other => overlaps(box, other, CLEAR)) || crossesCurve(box, obstacles.curves)) continue
    return {
      id: request.id,
      text: request.text,
      box,
      at: { x: box.x + 1, y: box.y + HEIGHT - 3.5 },
      leader: distance >= LEADER_FROM && !request.loose ? leaderOf(request.anchor, box) : null,
    }
  }
  return null
}

/** Places the labels in the order given: the first has the choice. */
export function placeLabels(requests: readonly LabelRequest[], obstacles: Obstacles) {
  const placed: PlacedLabel[] = []
  const unplaced: LabelRequest[] = []
  for (const request of requests) {
    const label = place(request, obstacles, placed.map(one => one.box))
    if (label) placed.push(label)
    else unplaced.push(request)
  }
  return { placed, unplaced }
}
