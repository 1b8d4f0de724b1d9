/** Numbers that are known from the text alone. */
import type { Node } from '../syntax/node'
import { bare } from '../syntax/node'

/** The number that a literal, with its sign, brackets and quotients, stands for. */
export function literalValue(node: Node): number | undefined {
  const inner = bare(node)
  if (inner.type === 'number') return inner.value
  if (inner.type === 'negate') {
    const value = literalValue(inner.inner)
    return value === undefined ? undefined : -value
  }
  if (inner.type !== 'binary' || inner.operator !== '/' || inner.implicit) return undefined
  const above = literalValue(inner.left)
  const below = literalValue(inner.right)
  return above === undefined || below === undefined || below === 0 ? undefined : above / below
}
