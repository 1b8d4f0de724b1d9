/** Kinds in words, for messages. */
import { isNone } from '../quantity/dimension'
import type { Kind } from '../quantity/kind'
import { dimensionText } from '../quantity/show'
import { unitText } from '../quantity/unitProduct'

/** `V`, `a plain number`, `a level in dB` … */
export function describe(kind: Kind): string {
  switch (kind.type) {
    case 'number': return describeNumber(kind)
    case 'level': return kind.reference ? `a level in ${kind.reference}` : 'a level in dB'
    case 'list': return `a list of ${describe(kind.of)}`
    case 'text': return 'text'
    case 'band': return 'a range of frequency'
    case 'series': return 'a series of preferred values'
    case 'laplace': return isNone(kind.dimension) ? 'a plain function of s' : `a function of s in ${dimensionText(kind.dimension)}`
    case 'transfer': return 'a transfer function'
    case 'function': return 'a function'
  }
}

function describeNumber(kind: Extract<Kind, { type: 'number' }>): string {
  if (kind.point) return 'a temperature in °C'
  const complex = kind.complex ? 'complex ' : ''
  if (!isNone(kind.dimension)) return complex + (kind.mark === undefined ? dimensionText(kind.dimension) : markedText(kind))
  if (kind.angle === 'deg') return 'an angle in degrees'
  if (kind.display) return `a number in ${unitText(kind.display.unit)}`
  return kind.complex ? 'a complex number' : 'a plain number'
}

function markedText(kind: Extract<Kind, { type: 'number' }>): string {
  const frequency = kind.dimension[2] === -1
  if (kind.mark === 'Hz') return frequency ? 'Hz' : `${dimensionText(kind.dimension)} of a frequency in Hz`
  return frequency ? 'rad/s' : `${dimensionText(kind.dimension)} of an angular frequency`
}
