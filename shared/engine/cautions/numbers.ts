/** Numbers of the cautions. */
import { ln, pow } from '../numeric/math'
import { LEVEL, number } from '../quantity/kind'
import { ENERGY, RESISTANCE, VOLTAGE } from '../quantity/dimension'
import { showLevel, showNumber } from '../quantity/show'
import type { NumberKind } from '../quantity/kind'
import { RESIDUAL } from './figures'

const KINDS: Record<'V' | 'J' | 'Ω' | 'Hz', NumberKind> = {
  V: number(VOLTAGE), J: number(ENERGY), Ω: number(RESISTANCE), Hz: number([0, 0, -1, 0, 0, 0, 0], { mark: 'Hz' }),
}

/** Three digits say enough in a sentence. */
const DIGITS = 3

export function shown(value: number, unit: keyof typeof KINDS | 'dB'): string {
  const text = unit === 'dB' ? showLevel(value, LEVEL, DIGITS + 1, true) : showNumber(value, KINDS[unit], DIGITS, true)
  return `${text.text} ${text.unit}`
}

/** Largest resistance that discharges to the residual voltage in time: t/(C·ln(V/V_r)). */
export function bleeder(farads: number, volts: number): number {
  return RESIDUAL.seconds / (farads * ln(volts / RESIDUAL.voltage))
}

export function ratioOfLevel(db: number): number {
  return pow(10, db / 20)
}
