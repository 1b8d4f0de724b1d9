/**
 * The units of the line language. Factors to SI are exact by definition (BIPM SI Brochure,
 * 9th edition; international yard and pound agreement, 1959) unless said otherwise.
 */
import type { DimensionVector } from '../types'
import * as D from './dimension'

export type Mark = 'Hz' | 'rad/s'

export interface Unit {
  /** As it is written in a line, with its prefix. */
  symbol: string
  /** As it is shown. */
  text: string
  latex: string
  /** The same without its upright face, for prefixes to join. */
  upright: string
  dimension: DimensionVector
  /** SI value = number × up ÷ down; two factors so that decimal prefixes lose no digit. */
  up: number
  down: number
  /** Whether a prefix may be chosen freely when a value is shown in this unit. */
  prefixable: boolean
  mark?: Mark
  angle?: 'deg' | 'rad'
  /** A level in dB, a level with a reference, a point on the Celsius scale. */
  special?: 'level' | 'dBm' | 'dBV' | 'dBuV' | 'point'
  /** Shown in its own right rather than by its dimension. */
  peculiar?: true
  /** Stands behind its number without a space. */
  tight?: true
}

type Entry = Omit<Unit, 'symbol' | 'text' | 'latex' | 'upright' | 'down' | 'up' | 'prefixable'>
  & { symbol: string, text?: string, latex?: string, up?: number, down?: number, prefixes?: 'si' | 'metre' }

const NEPER_DB = 8.685889638065037

const BASE: Entry[] = [
  { symbol: 'm', dimension: D.LENGTH, prefixes: 'metre' },
  { symbol: 'g', dimension: D.MASS, down: 1000, prefixes: 'si' },
  { symbol: 's', dimension: D.TIME, prefixes: 'si' },
  { symbol: 'A', dimension: D.CURRENT, prefixes: 'si' },
  { symbol: 'K', dimension: D.TEMPERATURE, prefixes: 'si' },
  { symbol: 'mol', dimension: D.AMOUNT, prefixes: 'si' },
  { symbol: 'cd', dimension: D.LIGHT },
]

const DERIVED: Entry[] = [
  { symbol: 'V', dimension: D.VOLTAGE, prefixes: 'si' },
  { symbol: 'ohm', text: 'Ω', latex: '\\Omega', dimension: D.RESISTANCE, prefixes: 'si' },
  { symbol: 'S', dimension: D.CONDUCTANCE, prefixes: 'si' },
  { symbol: 'mho', dimension: D.CONDUCTANCE, peculiar: true },
  { symbol: 'H', dimension: D.INDUCTANCE, prefixes: 'si' },
  { symbol: 'F', dimension: D.CAPACITANCE, prefixes: 'si' },
  { symbol: 'C', dimension: D.CHARGE, prefixes: 'si' },
  { symbol: 'J', dimension: D.ENERGY, prefixes: 'si' },
  { symbol: 'W', dimension: D.POWER, prefixes: 'si' },
  { symbol: 'N', dimension: D.FORCE, prefixes: 'si' },
  { symbol: 'Pa', dimension: D.PRESSURE, prefixes: 'si' },
  { symbol: 'Wb', dimension: D.FLUX, prefixes: 'si' },
  { symbol: 'T', dimension: D.FLUX_DENSITY, prefixes: 'si' },
  { symbol: 'Hz', dimension: D.FREQUENCY, mark: 'Hz', prefixes: 'si' },
  { symbol: 'lm', dimension: D.LIGHT },
  { symbol: 'lx', dimension: D.times(D.LIGHT, D.raised(D.LENGTH, -2)) },
]

const OTHER: Entry[] = [
  { symbol: 'rad', dimension: D.NONE, angle: 'rad', prefixes: 'si' },
  { symbol: 'deg', text: '°', latex: '{}^{\\circ}', dimension: D.NONE, up: 3.141592653589793, down: 180, angle: 'deg', tight: true },
  { symbol: 'arcmin', text: '′', latex: '{}^{\\prime}', dimension: D.NONE, up: 3.141592653589793, down: 10_800, angle: 'deg', tight: true },
  { symbol: 'arcsec', text: '″', latex: '{}^{\\prime\\prime}', dimension: D.NONE, up: 3.141592653589793, down: 648_000, angle: 'deg', tight: true },
  { symbol: 'percent', text: '%', latex: '\\%', dimension: D.NONE, down: 100, peculiar: true },
  { symbol: 'ppm', dimension: D.NONE, down: 1e6, peculiar: true },
  { symbol: 'decade', dimension: D.NONE },
  { symbol: 'octave', dimension: D.NONE, up: 0.3010299956639812 },
  { symbol: 'dB', dimension: D.NONE, special: 'level' },
  { symbol: 'Np', dimension: D.NONE, up: NEPER_DB, special: 'level', peculiar: true },
  { symbol: 'dBm', dimension: D.POWER, special: 'dBm' },
  { symbol: 'dBV', dimension: D.VOLTAGE, special: 'dBV' },
  { symbol: 'dBuV', text: 'dBµV', latex: '\\mathrm{dB}\\mu\\mathrm{V}', dimension: D.VOLTAGE, special: 'dBuV' },
  { symbol: 'degC', text: '°C', latex: '{}^{\\circ}\\mathrm{C}', dimension: D.TEMPERATURE, special: 'point' },
  { symbol: 'min', dimension: D.TIME, up: 60, peculiar: true },
  { symbol: 'h', dimension: D.TIME, up: 3600, peculiar: true },
  { symbol: 'rpm', text: 'r/min', latex: 'r/min', dimension: D.FREQUENCY, down: 60, mark: 'Hz', peculiar: true },
  { symbol: 'eV', dimension: D.ENERGY, up: 1.602176634e-19, prefixes: 'si', peculiar: true },
  { symbol: 'Wh', dimension: D.ENERGY, up: 3600, prefixes: 'si', peculiar: true },
  { symbol: 'Ah', dimension: D.CHARGE, up: 3600, prefixes: 'si', peculiar: true },
  { symbol: 'VA', dimension: D.POWER, prefixes: 'si', peculiar: true },
  { symbol: 'bar', dimension: D.PRESSURE, up: 1e5, prefixes: 'si', peculiar: true },
  { symbol: 'gauss', text: 'G', latex: 'G', dimension: D.FLUX_DENSITY, down: 1e4, peculiar: true },
  { symbol: 'inch', text: 'in', latex: 'in', dimension: D.LENGTH, up: 254, down: 1e4, peculiar: true },
  { symbol: 'foot', text: 'ft', latex: 'ft', dimension: D.LENGTH, up: 3048, down: 1e4, peculiar: true },
  { symbol: 'mil', dimension: D.LENGTH, up: 254, down: 1e7, peculiar: true },
  { symbol: 'oz', dimension: D.MASS, up: 28_349_523_125, down: 1e12, peculiar: true },
]

/** Long forms; `s`, `min` and `h` are wanted as names or functions often enough. */
const LONG: [string, string][] = [
  ['second', 's'], ['seconds', 's'], ['minute', 'min'], ['minutes', 'min'], ['hour', 'h'], ['hours', 'h'],
  ['metre', 'm'], ['meter', 'm'], ['gram', 'g'], ['ampere', 'A'], ['amp', 'A'], ['kelvin', 'K'],
  ['volt', 'V'], ['siemens', 'S'], ['henry', 'H'], ['farad', 'F'], ['coulomb', 'C'], ['joule', 'J'], ['watt', 'W'],
  ['newton', 'N'], ['pascal', 'Pa'], ['weber', 'Wb'], ['tesla', 'T'], ['hertz', 'Hz'], ['neper', 'Np'],
  ['degree', 'deg'], ['radian', 'rad'], ['micron', 'um'], ['Celsius', 'degC'],
]

interface Prefix { symbol: string, text: string, upright: string, up: number, down: number, metreOnly?: true }

export const PREFIXES: readonly Prefix[] = [
  { symbol: 'f', text: 'f', upright: 'f', up: 1, down: 1e15 },
  { symbol: 'p', text: 'p', upright: 'p', up: 1, down: 1e12 },
  { symbol: 'n', text: 'n', upright: 'n', up: 1, down: 1e9 },
  { symbol: 'u', text: 'µ', upright: '\\mu ', up: 1, down: 1e6 },
  { symbol: 'm', text: 'm', upright: 'm', up: 1, down: 1e3 },
  { symbol: 'c', text: 'c', upright: 'c', up: 1, down: 100, metreOnly: true },
  { symbol: 'd', text: 'd', upright: 'd', up: 1, down: 10, metreOnly: true },
  { symbol: 'k', text: 'k', upright: 'k', up: 1e3, down: 1 },
  { symbol: 'M', text: 'M', upright: 'M', up: 1e6, down: 1 },
  { symbol: 'G', text: 'G', upright: 'G', up: 1e9, down: 1 },
  { symbol: 'T', text: 'T', upright: 'T', up: 1e12, down: 1 },
]

const units = new Map<string, Unit>()

function faces(upright: string): Pick<Unit, 'latex' | 'upright'> {
  return { upright, latex: /^[A-Za-z]|^\\Omega/.test(upright) ? `\\mathrm{${upright}}` : upright }
}

function plain(entry: Entry): Unit {
  const { prefixes, text, latex, ...rest } = entry
  return {
    ...rest,
    text: text ?? entry.symbol,
    ...faces(latex ?? entry.symbol),
    up: entry.up ?? 1,
    down: entry.down ?? 1,
    prefixable: prefixes !== undefined,
  }
}

function register(entry: Entry): void {
  const unit = plain(entry)
  units.set(unit.symbol, unit)
  if (!entry.prefixes) return
  for (const prefix of PREFIXES) {
    if (prefix.metreOnly && entry.prefixes !== 'metre') continue
    const symbol = prefix.symbol + unit.symbol
    if (units.has(symbol)) continue
    units.set(symbol, { ...unit, symbol, text: prefix.text + unit.text, upright: prefix.upright + unit.upright, latex: prefix.symbol === 'u' ? `\\mu\\mathrm{${unit.upright}}` : `\\mathrm{${prefix.upright}${unit.upright}}`, up: unit.up * prefix.up, down: unit.down * prefix.down, prefixable: false })
  }
}

// Whole words first: `min` is a minute, not a milli-inch, and `Pa` a pascal.
for (const entry of [...OTHER, ...BASE, ...DERIVED]) units.set(entry.symbol, plain(entry))
for (const entry of [...OTHER, ...BASE, ...DERIVED]) register(entry)
for (const [long, short] of LONG) {
  const unit = units.get(short)
  if (unit) units.set(long, { ...unit, symbol: long })
}

/** The unit that a word means, with its prefix, or undefined. */
export function findUnit(word: string): Unit | undefined {
  return units.get(word)
}

export function isUnit(word: string): boolean {
  return units.has(word)
}

/** Every word that is a unit, for completion. */
export function unitWords(): string[] {
  return [...units.keys()]
}
