/** The tree of a line after every word has been read as a unit, a name or a constant. */
import type { UnitProduct } from '../quantity/unitProduct'
import type { BinaryOperator, Comparison } from '../syntax/node'
import type { SourceRange } from '../types'

export type Resolved =
  | { type: 'number', value: number, text: string, at: SourceRange }
  | { type: 'constant', name: 'pi' | 'e' | 'i', at: SourceRange }
  | { type: 'variable', at: SourceRange }
  | { type: 'name', name: string, at: SourceRange }
  | { type: 'unit', unit: UnitProduct, at: SourceRange }
  | { type: 'quantity', number: Resolved, unit: UnitProduct, at: SourceRange }
  | { type: 'call', name: string, nameAt: SourceRange, args: Resolved[], at: SourceRange }
  | { type: 'series', name: string, at: SourceRange }
  | { type: 'bracket', inner: Resolved, at: SourceRange }
  | { type: 'list', items: Resolved[], at: SourceRange }
  | { type: 'negate', inner: Resolved, at: SourceRange }
  | { type: 'binary', operator: BinaryOperator, implicit: boolean, left: Resolved, right: Resolved, at: SourceRange }
  | { type: 'to', value: Resolved, unit: UnitProduct, unitAt: SourceRange, at: SourceRange }
  | { type: 'compare', operators: Comparison[], sides: Resolved[], at: SourceRange }
  | { type: 'choice', condition: Resolved, yes: Resolved, no: Resolved, at: SourceRange }

export type ResolvedOf<T extends Resolved['type']> = Extract<Resolved, { type: T }>

/** The node within its brackets. */
export function within(node: Resolved): Resolved {
  let inner = node
  while (inner.type === 'bracket') inner = inner.inner
  return inner
}
