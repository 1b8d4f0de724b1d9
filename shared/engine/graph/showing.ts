/** Values and limits as they are shown, all limits of a value in its own unit. */
import type { DimensionVector, Shown } from '../types'
import { sameDimension } from '../quantity/dimension'
import type { ScalarKind } from '../quantity/kind'
import { displayOf, scaleFor, showLevel, showNumber, showScaled, unboundedShown } from '../quantity/show'
import type { Scale } from '../quantity/show'
import { unitText } from '../quantity/unitProduct'

/** JSON has no infinity: an unbounded margin is stored as the largest double. */
export function storable(value: number): number {
  return Number.isFinite(value) ? value : value > 0 ? Number.MAX_VALUE : -Number.MAX_VALUE
}

export type Showing = { kind: ScalarKind, scale?: Scale }

/** The unit and prefix of a value, to be used for its limits too. */
export function scaled(kind: ScalarKind, value: number, digits: number, like: ScalarKind = kind): Showing {
  if (kind.type === 'level') return { kind: like.type === 'level' ? { type: 'level', ...(like.display && { display: like.display }) } : kind }
  if (kind.point) return { kind }
  const same = like.type === 'number' && sameDimension(kind.dimension as DimensionVector, like.dimension)
  const display = same && like.display ? like.display : displayOf(kind)
  return { kind, scale: scaleFor(Number.isFinite(value) ? value : 1, display, digits) }
}

export function showScalar(value: number, { kind, scale }: Showing, digits: number): Shown {
  if (!Number.isFinite(value)) return unboundedShown(scale ? unitText(scale.unit) : kind.type === 'level' ? 'dB' : '')
  if (kind.type === 'level') return showLevel(value, kind, digits)
  return scale ? showScaled(value, scale, digits) : showNumber(value, kind, digits)
}
