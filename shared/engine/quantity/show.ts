/** Numbers as they are shown: engineering notation, significant digits, units in their own signs. */
import type { DimensionVector, Shown } from '../types'
import { isNone } from './dimension'
import type { Display, LevelKind, NumberKind } from './kind'
import { naturalUnit } from './naturalUnit'
import { PREFIXES, findUnit } from './unitTable'
import { isTight, unitLatex, unitProduct, unitText } from './unitProduct'
import type { UnitProduct } from './unitProduct'

/** A unit with its prefix chosen, and the power of ten that is left over. */
export interface Scale { unit: UnitProduct, exponent: number }

/** Plain numbers between these are written out; others get a power of ten. */
const PLAIN_FROM = 1e-4
const PLAIN_TO = 1e6

/** SI value in the unit, without the power of ten. */
export function inUnit(si: number, unit: UnitProduct): number {
  return si * unit.down / unit.up
}

/** Picks prefix and power of ten so that 1 ≤ |number| < 1000 after rounding. */
export function scaleFor(size: number, display: Display, digits: number): Scale {
  const { unit, fixed } = display
  const magnitude = rounded(Math.abs(inUnit(size, unit)), digits)
  if (magnitude === 0 || !Number.isFinite(magnitude)) return { unit, exponent: 0 }
  const head = unit.factors[0]
  if (!fixed && head && head.power === 1 && head.unit.prefixable) {
    const prefixed = withPrefix(unit, size, digits)
    if (prefixed) return prefixed
  }
  if (magnitude >= PLAIN_FROM && magnitude < PLAIN_TO && (fixed || isNone(unit.dimension) || (magnitude >= 0.1 && magnitude < 1000))) return { unit, exponent: 0 }
  return { unit, exponent: thousandsOf(magnitude) }
}

function withPrefix(unit: UnitProduct, size: number, digits: number): Scale | undefined {
  const [head, ...rest] = unit.factors
  if (!head) return undefined
  const candidates = ['', ...PREFIXES.filter(prefix => !prefix.metreOnly).map(prefix => prefix.symbol)]
  for (const prefix of candidates) {
    const found = findUnit(prefix + head.unit.symbol)
    if (!found) continue
    const scaled = unitProduct([{ unit: found, power: 1 }, ...rest])
    const magnitude = rounded(Math.abs(inUnit(size, scaled)), digits)
    if (magnitude >= 1 && magnitude < 1000) return { unit: scaled, exponent: 0 }
  }
  return undefined
}

/** The multiple of three that is the power of ten below the number. */
function thousandsOf(magnitude: number): number {
  const exponent = Number(magnitude.toExponential().split('e')[1])
  return Math.floor(exponent / 3) * 3
}

function rounded(x: number, digits: number): number {
  return Number(x.toPrecision(digits))
}

/** 4.700, 23.22, 685.6: as many digits as the sheet shows. */
export function digitsText(x: number, digits: number): string {
  if (x === 0) return '0'
  const short = x.toPrecision(digits)
  return short.includes('e') ? plainDecimal(short) : short
}

/** A number such as 1.2e+4 without its exponent. */
function plainDecimal(text: string): string {
  const value = Number(text)
  const exponent = Number(text.split('e')[1])
  return exponent >= 0 ? value.toFixed(0) : value.toFixed(Math.min(100, text.replace(/e.*/, '').replace(/[-.]/g, '').length - 1 - exponent))
}

function trimmed(text: string): string {
  return text.includes('.') ? text.replace(/\.?0+$/, '') : text
}

const MINUS = '−'
const SUPERSCRIPTS = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹']

function superscript(n: number): string {
  const digits = String(Math.abs(n)).split('').map(digit => SUPERSCRIPTS[Number(digit)] ?? '').join('')
  return n < 0 ? `⁻${digits}` : digits
}

/** Number with its power of ten, as text and as LaTeX. */
function mantissa(x: number, scale: Scale, digits: number, trim: boolean): { text: string, latex: string } {
  const value = inUnit(x, scale.unit) / Number(`1e${scale.exponent}`)
  const written = trim ? trimmed(digitsText(value, digits)) : digitsText(value, digits)
  const text = written.replace('-', MINUS)
  if (scale.exponent === 0 || x === 0) return { text, latex: written }
  return { text: `${text} × 10${superscript(scale.exponent)}`, latex: `${written}\\times 10^{${scale.exponent}}` }
}

function withUnit(number: { text: string, latex: string }, unit: UnitProduct): Shown {
  const latexUnit = unitLatex(unit)
  const space = latexUnit === '' || isTight(unit) ? '' : '\\,'
  return { text: number.text, unit: unitText(unit), latex: `${number.latex}${space}${latexUnit}` }
}

/** `trim` leaves trailing zeros out, for numbers within a formula. */
export function showScaled(si: number, scale: Scale, digits: number, trim = false): Shown {
  return withUnit(mantissa(si, scale, digits, trim), scale.unit)
}

export function displayOf(kind: NumberKind): Display {
  return kind.display ?? { unit: naturalUnit(kind.dimension, kind.mark, kind.angle), fixed: false }
}

export function showNumber(si: number, kind: NumberKind, digits: number, trim = false): Shown {
  if (kind.point) return showPoint(si, kind, digits, trim)
  return showScaled(si, scaleFor(si, displayOf(kind), digits), digits, trim)
}

/** Kelvin added to a temperature in degrees Celsius (BIPM SI Brochure, 9th edition, 2.3.1). */
export const CELSIUS_ZERO = 273.15

const celsius = () => unitProduct([{ unit: findUnit('degC') ?? neverUnit(), power: 1 }])
function neverUnit(): never {
  throw new Error('the table of units lacks one of its own')
}

function showPoint(si: number, kind: NumberKind, digits: number, trim: boolean): Shown {
  // Digits of a point on the scale are counted from its zero; a sum in binary leaves a rest there.
  const degrees = Number((si - CELSIUS_ZERO).toPrecision(12))
  return showScaled(degrees, { unit: celsius(), exponent: 0 }, digits, trim)
}

export function showComplex(re: number, im: number, kind: NumberKind, digits: number, trim = false): Shown {
  const scale = scaleFor(Math.max(Math.abs(re), Math.abs(im)), displayOf(kind), digits)
  const ten = Number(`1e${scale.exponent}`)
  const [a, b] = [re, Math.abs(im)].map(part => mantissa(part / ten, { ...scale, exponent: 0 }, digits, trim))
  const minus = im < 0
  const plain = unitText(scale.unit) === '' && scale.exponent === 0
  const text = `${a?.text} ${minus ? MINUS : '+'} ${b?.text}i`
  const latex = `${a?.latex}${minus ? '-' : '+'}${b?.latex}\\,\\mathrm{i}`
  if (plain) return withUnit({ text, latex }, scale.unit)
  const power = scale.exponent === 0 ? { text: '', latex: '' } : { text: ` × 10${superscript(scale.exponent)}`, latex: `\\times 10^{${scale.exponent}}` }
  return withUnit({ text: `(${text})${power.text}`, latex: `\\left(${latex}\\right)${power.latex}` }, scale.unit)
}

/**
 * Levels are shown to a fixed place behind the point, 0.01 dB at four digits: what is left of a level
 * beyond that no instrument resolves. A level that would round away keeps two digits.
 */
export function showLevel(db: number, kind: LevelKind, digits: number, trim = false): Shown {
  const unit = kind.display?.unit ?? unitProduct([{ unit: findUnit(kind.reference ?? 'dB') ?? neverUnit(), power: 1 }])
  const value = inUnit(db, unit)
  const fixed = value.toFixed(Math.max(0, digits - 2))
  const written = Number(fixed) === 0 && value !== 0 && Math.abs(value) >= 1e-6 ? digitsText(value, 2) : fixed.replace(/^-(?=0*\.?0*$)/, '')
  const text = trim ? trimmed(written) : written
  return withUnit({ text: text.replace('-', MINUS), latex: text }, unit)
}

export function unboundedShown(unit: string): Shown {
  return { text: 'unbounded', unit, latex: '\\text{unbounded}' }
}

/** The unit of a dimension alone, as in messages: `V`, `Ω`, `1/s`. */
export function dimensionText(dimension: DimensionVector): string {
  return isNone(dimension) ? 'plain number' : unitText(naturalUnit(dimension))
}
