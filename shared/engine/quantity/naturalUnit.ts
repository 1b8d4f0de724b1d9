/** The unit in which an engineer would state a value of a given dimension. */
import type { DimensionVector } from '../types'
import * as D from './dimension'
import { findUnit } from './unitTable'
import type { Mark } from './unitTable'
import { unitProduct } from './unitProduct'
import type { UnitFactor, UnitProduct } from './unitProduct'

/** In order of preference where several have the same dimension. */
const NAMED = ['V', 'A', 'ohm', 'W', 'F', 'H', 'S', 'J', 'C', 'Wb', 'T', 's', 'm', 'K', 'N', 'Pa', 'g', 'mol', 'cd']
/** What quantities are stated per. */
const PER: [string, number][] = [['s', 1], ['K', 1], ['m', 1], ['W', 1], ['V', 1], ['A', 1], ['m', 2], ['m', 3], ['Hz', 0.5], ['Hz', 1], ['s', 2]]

const known = new Map<string, UnitProduct>()

export function naturalUnit(dimension: DimensionVector, mark?: Mark, angle?: 'deg' | 'rad'): UnitProduct {
  const key = `${dimension.join()} ${mark ?? ''} ${angle ?? ''}`
  const found = known.get(key)
  if (found) return found
  const made = unitProduct(choose(dimension, mark, angle))
  known.set(key, made)
  return made
}

function factor(symbol: string, power: number): UnitFactor {
  const unit = findUnit(symbol)
  if (!unit) throw new Error(`the table of units lacks ${symbol}`)
  return { unit, power }
}

function choose(dimension: DimensionVector, mark: Mark | undefined, angle: 'deg' | 'rad' | undefined): UnitFactor[] {
  if (D.isNone(dimension)) return angle ? [factor(angle, 1)] : []
  if (mark && D.sameDimension(dimension, D.FREQUENCY)) return mark === 'Hz' ? [factor('Hz', 1)] : [factor('rad', 1), factor('s', -1)]
  return single(dimension) ?? quotient(dimension) ?? product(dimension) ?? base(dimension)
}

/** One named unit, its power or its reciprocal. */
function single(dimension: DimensionVector): UnitFactor[] | undefined {
  for (const power of [1, -1, 2, 0.5]) {
    for (const symbol of power === 1 ? NAMED : ['V', 'A', 'm', 's', 'K', 'ohm', 'F', 'W']) {
      const candidate = factor(symbol, power)
      if (D.sameDimension(D.raised(candidate.unit.dimension, power), dimension)) return [candidate]
    }
  }
  return undefined
}

function quotient(dimension: DimensionVector): UnitFactor[] | undefined {
  for (const [below, power] of PER) {
    for (const above of NAMED) {
      const candidates = [factor(above, 1), factor(below, -power)]
      if (D.sameDimension(unitProduct(candidates).dimension, dimension)) return candidates
    }
  }
  return undefined
}

function product(dimension: DimensionVector): UnitFactor[] | undefined {
  for (const first of NAMED) {
    for (const second of ['s', 'm', 'A', 'K', 'Hz']) {
      const candidates = [factor(first, 1), factor(second, 1)]
      if (D.sameDimension(unitProduct(candidates).dimension, dimension)) return candidates
    }
  }
  return undefined
}

const SI_BASE = ['m', 'kg', 's', 'A', 'K', 'mol', 'cd']

function base(dimension: DimensionVector): UnitFactor[] {
  return SI_BASE.map((symbol, index) => factor(symbol, dimension[index] ?? 0))
    .filter(candidate => candidate.power !== 0)
    .sort((a, b) => (a.power > 0 ? 0 : 1) - (b.power > 0 ? 0 : 1))
}
