/** Products of powers of units, such as `mA/V` or `nV/Hz^(1/2)`. */
import { fault } from '../fault'
import { integerPower, pow } from '../numeric/math'
import type { DimensionVector, SourceRange } from '../types'
import * as D from './dimension'
import type { Mark, Unit } from './unitTable'

export interface UnitFactor { unit: Unit, power: number }

export interface UnitProduct {
  factors: UnitFactor[]
  dimension: DimensionVector
  /** SI value = number × up ÷ down. */
  up: number
  down: number
  mark?: Mark
  angle?: 'deg' | 'rad'
  /** dB and Np, also per decade: their numbers are levels. */
  level?: true
  /** dBm, dBV, dBuV: levels against a reference. */
  reference?: 'dBm' | 'dBV' | 'dBuV'
  /** Degrees Celsius: a point on the scale. */
  point?: true
}

export function unitProduct(factors: UnitFactor[], at?: SourceRange): UnitProduct {
  let dimension = D.NONE
  let up = 1
  let down = 1
  for (const { unit, power } of factors) {
    dimension = D.times(dimension, D.raised(unit.special ? D.NONE : unit.dimension, power))
    const [rise, fall] = power >= 0 ? [unit.up, unit.down] : [unit.down, unit.up]
    up *= positivePower(rise, Math.abs(power))
    down *= positivePower(fall, Math.abs(power))
  }
  const special = specialOf(factors, dimension, at)
  if (special.reference || special.point) dimension = factors[0]?.unit.dimension ?? dimension
  const mark = markOf(factors, dimension)
  const angle = D.isNone(dimension) && factors.length === 1 && factors[0]?.power === 1 ? factors[0].unit.angle : undefined
  return { factors, dimension, up, down, ...special, ...(mark ? { mark } : {}), ...(angle ? { angle } : {}) }
}

function positivePower(base: number, power: number): number {
  if (base === 1) return 1
  return Number.isInteger(power) ? integerPower(base, power) : pow(base, power)
}

function markOf(factors: UnitFactor[], dimension: DimensionVector): Mark | undefined {
  if (!D.isTimeLike(dimension)) return undefined
  const marked = factors.find(factor => factor.unit.mark)?.unit.mark
  return marked ?? (factors.some(factor => factor.unit.angle) ? 'rad/s' : undefined)
}

type Special = Pick<UnitProduct, 'level' | 'reference' | 'point'>

function specialOf(factors: UnitFactor[], dimension: DimensionVector, at: SourceRange | undefined): Special {
  const special = factors.filter(factor => factor.unit.special)
  const [first] = special
  if (!first) return {}
  const kind = first.unit.special
  if (kind === 'level') {
    if (special.length === 1 && first.power === 1 && D.isNone(dimension)) return { level: true }
    throw fault('level-unit', `${first.unit.text} is a level; it stands alone or per decade or octave.`, 'Turn a level into a factor with `ratio(x)` or `powerRatio(x)` before it takes part in a product.', at)
  }
  if (factors.length === 1 && first.power === 1) return kind === 'point' ? { point: true } : { reference: kind }
  if (kind === 'point') throw fault('temperature-point', '°C marks a point on the temperature scale and takes no part in products.', 'Use `K` for an interval, as in `ppm/K` or `K/W`.', at)
  throw fault('level-unit', `${first.unit.text} is a level against a reference and takes no part in products.`, 'Convert it first: `to V` or `to W`.', at)
}

/** The product with one more factor; equal units are put together. */
export function withFactor(product: UnitProduct, factor: UnitFactor, at?: SourceRange): UnitProduct {
  return unitProduct([...product.factors, factor], at)
}

const SUPERSCRIPT: Record<string, string> = { '-': '⁻', '0': '⁰', '1': '¹', '2': '²', '3': '³', '4': '⁴', '5': '⁵', '6': '⁶', '7': '⁷', '8': '⁸', '9': '⁹' }

function powerText(power: number): string {
  if (power === 1) return ''
  if (power === 2 || power === 3) return SUPERSCRIPT[String(power)] ?? ''
  return `^${fractionText(power)}`
}

function fractionText(power: number): string {
  const fraction = D.asFraction(power)
  if (!fraction || fraction.q === 1) return String(power)
  return `(${fraction.p}/${fraction.q})`
}

/** As it is shown and can be typed again: `mA/V`, `kg·m²/s²`. */
export function unitText(product: UnitProduct): string {
  const above = product.factors.filter(factor => factor.power > 0).map(factor => factor.unit.text + powerText(factor.power))
  const below = product.factors.filter(factor => factor.power < 0).map(factor => factor.unit.text + powerText(-factor.power))
  if (below.length === 0) return above.join('·')
  const denominator = below.length === 1 ? below[0] ?? '' : `(${below.join('·')})`
  return `${above.length > 0 ? above.join('·') : '1'}/${denominator}`
}

export function unitLatex(product: UnitProduct): string {
  const one = ({ unit, power }: UnitFactor, sign: number) => power * sign === 1 ? unit.latex : `${unit.latex}^{${fractionText(power * sign).replace(/[()]/g, '')}}`
  const above = product.factors.filter(factor => factor.power > 0).map(factor => one(factor, 1))
  const below = product.factors.filter(factor => factor.power < 0)
  if (below.length === 0) return above.join('\\,')
  if (above.length === 0) return below.map(factor => one(factor, 1)).join('\\,')
  const denominator = below.map(factor => one(factor, -1)).join('\\,')
  return `${above.join('\\,')}/${below.length > 1 ? `(${denominator})` : denominator}`
}

/** Whether the unit stands close behind its number, as the degree sign does. */
export function isTight(product: UnitProduct): boolean {
  return product.factors.length === 1 && product.factors[0]?.unit.tight === true
}

/** Units that are kept for show because the dimension alone would not choose them. */
export function isPeculiar(product: UnitProduct): boolean {
  return product.angle !== undefined || product.factors.some(factor => factor.unit.peculiar)
}
