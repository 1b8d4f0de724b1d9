/** The standard form of a transfer function as LaTeX: gain, integrators, first- and second-order factors. */
import { FREQUENCY, over, raised } from '../quantity/dimension'
import { COUNT, number } from '../quantity/kind'
import { showNumber } from '../quantity/show'
import type { StandardFactor, StandardForm } from '../transfer'
import type { DimensionVector } from '../types'

/** @param dimension that of the transfer function */
export function standardFormLatex(form: StandardForm, dimension: DimensionVector, digits: number): string {
  const zeros = form.numerator.map(factor => factorLatex(factor, digits))
  const poles = form.denominator.map(factor => factorLatex(factor, digits))
  const origin = Math.abs(form.origin) > 1 ? `s^{${Math.abs(form.origin)}}` : 's'
  if (form.origin > 0) zeros.unshift(origin)
  if (form.origin < 0) poles.unshift(origin)
  const coefficient = over(dimension, raised(FREQUENCY, form.origin))
  const gain = showNumber(form.gain, number(coefficient), digits, true).latex
  const one = gain === '1'
  const above = [...(one && zeros.length > 0 ? [] : [gain]), ...zeros].join('\\,')
  return poles.length === 0 ? above : `\\frac{${above}}{${poles.join('\\,')}}`
}

function factorLatex(factor: StandardFactor, digits: number): string {
  const omega = showNumber(factor.omega, number(FREQUENCY, { mark: 'rad/s' }), digits, true).latex
  const ratio = `\\frac{s}{${omega}}`
  const power = factor.power === 1 ? '' : `^{${factor.power}}`
  if (factor.kind === 'first') return `\\left(1${factor.sign === 1 ? '+' : '-'}${ratio}\\right)${power}`
  const damping = showNumber(factor.zeta, COUNT, digits, true).latex
  const middle = factor.zeta === 0 ? '' : `${factor.zeta < 0 ? '' : '+'}2\\cdot${factor.zeta < 0 ? `\\left(${damping}\\right)` : damping}\\,${ratio}`
  return `\\left(1${factor.zeta < 0 ? `+${middle}` : middle}+\\left(${ratio}\\right)^{2}\\right)${power}`
}
