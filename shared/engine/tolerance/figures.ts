/** Figures of an output as they are shown, all in its own unit. */
import { scaled, showScalar, storable } from '../graph/showing'
import type { ScalarKind } from '../quantity/kind'
import { number } from '../quantity/kind'
import type { Figure } from './request'

export interface Show {
  /** A value of the output. */
  value: (x: number) => Figure
  /** A difference of two: an interval for a temperature, plain dB for a level. */
  change: (x: number) => Figure
}

export function showOf(kind: ScalarKind, nominal: number, digits: number): Show {
  const value = scaled(kind, nominal, digits)
  const interval: ScalarKind = kind.type === 'level' ? { type: 'level' } : kind.point ? number(kind.dimension) : kind
  const change = interval === kind ? undefined : interval
  return {
    value: x => ({ value: storable(x), shown: showScalar(x, value, digits) }),
    change: x => ({ value: storable(x), shown: showScalar(x, change ? scaled(change, x, digits) : value, digits) }),
  }
}
