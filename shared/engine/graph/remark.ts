/** The reference that an attenuation is counted from, in words. */
import { within } from '../check/resolved'
import type { Resolved } from '../check/resolved'
import type { Term } from '../check/term'
import { TWO_PI } from '../numeric/math'
import { FREQUENCY } from '../quantity/dimension'
import { LEVEL, number } from '../quantity/kind'
import { showLevel, showNumber } from '../quantity/show'
import type { Reference } from '../transfer'

export function remarkOf(tree: Resolved, terms: readonly Term[], digits: number): string | undefined {
  const sides = within(tree).type === 'compare' ? terms : terms.slice(0, 1)
  for (const term of sides) {
    const reference = term.reference?.()
    if (reference) return referenceText(reference, digits)
  }
  return undefined
}

function referenceText(reference: Reference, digits: number): string {
  const gain = showLevel(reference.gain, LEVEL, digits)
  const level = `${gain.text} ${gain.unit}`
  switch (reference.at) {
    case 'low': return `below ${level} at low frequency`
    case 'high': return `below ${level} at high frequency`
    case 'peak': return `below the peak of ${level} at ${hertz(reference.omega, digits)}`
    case 'given': return `below ${level} at ${hertz(reference.omega, digits)}`
  }
}

function hertz(omega: number, digits: number): string {
  const shown = showNumber(omega / TWO_PI, number(FREQUENCY, { mark: 'Hz' }), digits)
  return `${shown.text} ${shown.unit}`
}
