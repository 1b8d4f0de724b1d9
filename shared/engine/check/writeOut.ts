/** Parts of a line written out again, for messages that show both ways of reading it. */
import { unitText } from '../quantity/unitProduct'
import type { Node } from '../syntax/node'
import type { Resolved } from './resolved'

export function written(node: Node | Resolved): string {
  switch (node.type) {
    case 'number': return node.text
    case 'constant': case 'name': case 'series': return node.name
    case 'variable': return 's'
    case 'unit': return typedUnit(unitText(node.unit))
    case 'quantity': return `${written(node.number)} ${typedUnit(unitText(node.unit))}`
    case 'call': return `${node.name}(${node.args.map(written).join(', ')})`
    case 'bracket': return `(${written(node.inner)})`
    case 'list': return `[${node.items.map(written).join(', ')}]`
    case 'negate': return `-${written(node.inner)}`
    case 'binary': return writtenBinary(node)
    case 'to': return `${written(node.value)} to ${'type' in node.unit ? written(node.unit) : unitText(node.unit)}`
    case 'compare': return node.sides.map((side, i) => (i > 0 ? `${node.operators[i - 1]} ` : '') + written(side)).join(' ')
    case 'choice': return `${written(node.condition)} ? ${written(node.yes)} : ${written(node.no)}`
  }
}

function writtenBinary(node: Extract<Node | Resolved, { type: 'binary' }>): string {
  const left = written(node.left)
  const right = written(node.right)
  if (node.implicit) return `${left} ${right}`
  return node.operator === '+' || node.operator === '-' ? `${left} ${node.operator} ${right}` : `${left}${node.operator}${right}`
}

/** In the letters of a keyboard. */
function typedUnit(text: string): string {
  return text.replaceAll('Ω', 'ohm').replaceAll('µ', 'u').replaceAll('²', '^2').replaceAll('³', '^3').replaceAll('·', '*').replaceAll('°C', 'degC').replaceAll('°', 'deg')
}

/** A factor, in brackets where it has to be. */
export function asFactor(node: Node | Resolved): string {
  const text = written(node)
  return node.type === 'binary' || node.type === 'negate' || node.type === 'quantity' ? `(${text})` : text
}
