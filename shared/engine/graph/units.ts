/** Recorded values in a stated unit, for whoever compares them with figures from outside. */
import { readUnit } from '../check/readUnit'
import { Fault, fault } from '../fault'
import { TWO_PI, pow } from '../numeric/math'
import { NONE, sameDimension } from '../quantity/dimension'
import { CELSIUS_ZERO, inUnit } from '../quantity/show'
import { unitProduct } from '../quantity/unitProduct'
import type { UnitProduct } from '../quantity/unitProduct'
import { parseLine } from '../syntax/parse'
import type { DimensionVector, FrequencyMark, Problem, ResultValue } from '../types'

/** A scale from recorded numbers to numbers in a unit. */
export interface UnitScale { from: (recorded: number) => number }

/** What a unit is asked to state: the data of a result without its display. */
export interface Stated {
  type: 'number' | 'complex' | 'level'
  dimension?: DimensionVector
  mark?: FrequencyMark
  reference?: 'dBm' | 'dBV' | 'dBuV'
}

export function statedAs(value: ResultValue): Stated | undefined {
  switch (value.type) {
    case 'number': case 'complex': return { type: value.type, dimension: value.dimension, ...(value.mark && { mark: value.mark }) }
    case 'level': return { type: 'level', ...(value.reference && { reference: value.reference }) }
    default: return undefined
  }
}

/** The scale of a unit as it is written after `to`; the empty text is a plain number. */
export function unitScale(unit: string, stated: Stated): UnitScale | Problem {
  try {
    const product = readProduct(unit)
    return { from: scaleOf(product, stated, unit) }
  }
  catch (error) {
    if (error instanceof Fault) return error.problem
    throw error
  }
}

function readProduct(unit: string): UnitProduct {
  if (unit.trim() === '') return unitProduct([])
  const { body } = parseLine(`1 to ${unit}`)
  if (body?.type !== 'to') throw fault('unknown-unit', `\`${unit}\` is not a unit.`)
  return readUnit(body.unit, body)
}

function scaleOf(unit: UnitProduct, stated: Stated, text: string): (recorded: number) => number {
  const mismatch = () => fault('conversion-dimension', `The value cannot be stated in ${text === '' ? 'a plain number' : text}.`)
  if (stated.type === 'level') {
    if (stated.reference ? unit.reference !== stated.reference : !unit.level) throw mismatch()
    return x => inUnit(x, unit)
  }
  if (unit.level || unit.reference || !sameDimension(stated.dimension ?? NONE, unit.dimension)) throw mismatch()
  if (unit.point) return x => x - CELSIUS_ZERO
  if (!stated.mark || !unit.mark || stated.mark === unit.mark) return x => inUnit(x, unit)
  const power = stated.dimension?.[2] ?? 0
  const factor = pow(TWO_PI, unit.mark === 'rad/s' ? -power : power)
  return x => inUnit(x * factor, unit)
}
