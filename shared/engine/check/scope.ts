/** What a name means to the lines below its definition. */
import type { LaplaceKind } from '../quantity/kind'
import type { SourceRange } from '../types'
import type { CheckContext, Term } from './term'

export type Entity =
  | { type: 'value', term: Term }
  | { type: 'transfer', term: Term<LaplaceKind> }
  | { type: 'function', parameters: readonly string[], instantiate: (args: readonly Term[], at: SourceRange, context: CheckContext) => Term }
  /** Its line has an error. */
  | { type: 'failed', line: number }

export interface Scope {
  lookup: (name: string) => Entity | undefined
  /** Line, counted from 1, that defines the name further down. */
  definedBelow: (name: string) => number | undefined
  /** The name that the line itself defines. */
  own?: string
}
