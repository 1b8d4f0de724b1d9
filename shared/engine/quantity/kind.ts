/**
 * What is known of a value before any number is computed: its dimension, whether it is complex,
 * and the marks that keep hertz from radians per second, degrees from numbers and levels from ratios.
 */
import type { DimensionVector } from '../types'
import * as D from './dimension'
import type { UnitProduct } from './unitProduct'
import type { Mark } from './unitTable'

/** What a formula is made of, followed through names; only inference from it warns (L9, L10). */
export interface Trace {
  /** It holds a resistance, conductance, inductance or capacitance. */
  parts: boolean
  pi: boolean
  /** It is divided by something that holds pi. */
  overPi: boolean
  /** It was a value in Hz before pi entered. */
  lostHertz: boolean
  /** Nothing but plain numbers. */
  literal: boolean
}

/** How a value is shown: in this unit; `fixed` keeps its prefix. */
export interface Display { unit: UnitProduct, fixed: boolean }

export interface NumberKind {
  type: 'number'
  dimension: DimensionVector
  complex: boolean
  mark?: Mark
  angle?: 'deg' | 'rad'
  /** A point on the temperature scale. */
  point?: true
  /** A literal 0, which agrees with any dimension in sums and comparisons. */
  zero?: true
  /** Plain number known without evaluation; wanted for exponents. */
  constant?: number
  display?: Display
  /** Holds the text `unbounded` where a margin has no crossing. */
  open?: true
  trace: Trace
}

export interface LevelKind {
  type: 'level'
  reference?: 'dBm' | 'dBV' | 'dBuV'
  display?: Display
  open?: true
}

export type ScalarKind = NumberKind | LevelKind

export interface ListKind { type: 'list', of: ScalarKind }
export interface TextKind { type: 'text' }
export interface BandKind { type: 'band' }
export interface SeriesKind { type: 'series' }
/** A function of `s` on its way to a transfer function. */
export interface LaplaceKind {
  type: 'laplace'
  dimension: DimensionVector
  rational: boolean
  /** A constant times a power of `s`. */
  monomial: boolean
}
export interface TransferKind { type: 'transfer', dimension: DimensionVector, rational: boolean }
export interface FunctionKind { type: 'function', parameters: string[] }

export type Kind = ScalarKind | ListKind | TextKind | BandKind | SeriesKind | LaplaceKind | TransferKind | FunctionKind

export const PLAIN: Trace = { parts: false, pi: false, overPi: false, lostHertz: false, literal: false }

export function number(dimension: DimensionVector, more: Partial<Omit<NumberKind, 'type' | 'dimension'>> = {}): NumberKind {
  const trace = more.trace ?? PLAIN
  const parts = trace.parts || D.isCircuitValue(dimension)
  return { type: 'number', dimension, complex: false, ...more, trace: parts === trace.parts ? trace : { ...trace, parts } }
}

export const COUNT = number(D.NONE)
export const LEVEL: LevelKind = { type: 'level' }

/** The trace of something made of both. */
export function mergedTrace(a: Trace, b: Trace): Trace {
  return {
    parts: a.parts || b.parts,
    pi: a.pi || b.pi,
    overPi: a.overPi || b.overPi,
    lostHertz: a.lostHertz || b.lostHertz,
    literal: a.literal && b.literal,
  }
}

/** Without what holds for this one value only: its constant, and being a literal zero. */
export function general(kind: NumberKind): NumberKind {
  const { zero: _zero, constant: _constant, ...rest } = kind
  return rest
}

export function isPlainNumber(kind: Kind): kind is NumberKind {
  return kind.type === 'number' && !kind.point && D.isNone(kind.dimension)
}
