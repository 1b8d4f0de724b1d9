/** What the Output column says of a transfer function: its damping and corner, in a line or two. */
import type { Term } from '../check/term'
import { TWO_PI } from '../numeric/math'
import { FREQUENCY } from '../quantity/dimension'
import { COUNT, number } from '../quantity/kind'
import type { LaplaceKind } from '../quantity/kind'
import { showNumber } from '../quantity/show'
import * as T from '../transfer'
import type { Notice, Rational } from '../transfer'
import { standardFormLatex } from '../typeset/standardForm'
import type { ResultValue } from '../types'
import { fault } from '../fault'

export interface TransferResult {
  value: Extract<ResultValue, { type: 'transfer' }>
  notices: readonly Notice[]
}

export function transferResult(term: Term<LaplaceKind>, digits: number): TransferResult {
  const { dimension } = term.kind
  if (!term.rational) return { value: { type: 'transfer', rational: false, dimension, summary: ['swept numerically'] }, notices: [] }
  const r = term.rational()
  if (r.refused) throw fault(r.refused.code, r.refused.message, r.refused.hint, term.at)
  const form = T.standardForm(r)
  return {
    value: {
      type: 'transfer', rational: true, order: T.orderOf(r), dimension, summary: summaryOf(r, digits),
      ...(form.ok ? { standardForm: standardFormLatex(form.value, dimension, digits) } : {}),
    },
    notices: form.ok ? form.warnings ?? [] : [],
  }
}

function hertz(value: number, digits: number): string {
  const shown = showNumber(value, number(FREQUENCY, { mark: 'Hz' }), digits)
  return `${shown.text} ${shown.unit}`
}

function summaryOf(r: Rational, digits: number): string[] {
  const section = T.dominantSection(r)
  if (section.ok) return [`ζ ${showNumber(section.value.zeta, COUNT, Math.min(digits, 3)).text}`, `at ${hertz(section.value.omega / TWO_PI, digits)}`]
  const corner = T.cornerFrequency(r)
  if (corner.ok) return [`corner ${hertz(corner.value, digits)}`]
  const order = T.orderOf(r)
  return [order === 0 ? 'constant' : `order ${order}`]
}
