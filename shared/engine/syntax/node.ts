/** The syntax tree of a line. Every node knows the range of the typed text that it stands for. */
import type { SourceRange } from '../types'

export type BinaryOperator = '+' | '-' | '*' | '/' | '^' | '.*' | './' | '.^'
export type Comparison = '<' | '<=' | '>' | '>='

export interface NumberNode { type: 'number', value: number, text: string, at: SourceRange }
export interface NameNode { type: 'name', name: string, at: SourceRange }
export interface CallNode { type: 'call', name: string, nameAt: SourceRange, args: Node[], at: SourceRange }
export interface BracketNode { type: 'bracket', inner: Node, at: SourceRange }
export interface ListNode { type: 'list', items: Node[], at: SourceRange }
export interface NegateNode { type: 'negate', inner: Node, at: SourceRange }
export interface BinaryNode {
  type: 'binary'
  operator: BinaryOperator
  /** A product written by standing side by side. */
  implicit: boolean
  left: Node
  right: Node
  at: SourceRange
}
export interface ConversionNode { type: 'to', value: Node, unit: Node, at: SourceRange }
export interface CompareNode { type: 'compare', operators: Comparison[], sides: Node[], at: SourceRange }
export interface ChoiceNode { type: 'choice', condition: Node, yes: Node, no: Node, at: SourceRange }

export type Node =
  | NumberNode | NameNode | CallNode | BracketNode | ListNode | NegateNode
  | BinaryNode | ConversionNode | CompareNode | ChoiceNode

export interface Definition {
  name: string
  at: SourceRange
  /** Given for `f(x) = …` and `H(s) = …`. */
  parameters?: { name: string, at: SourceRange }[]
}

/** A line that could be read. Without `body` it is empty or holds only a note. */
export interface ParsedLine {
  define?: Definition
  body?: Node
  /** What stands right of ±, its conversion taken off. */
  tolerance?: Node
  /** The unit after `to` at the end of a line with ±. */
  toleranceUnit?: Node
  note?: string
  /** Every word of the line in reading order, for dependencies. */
  words: string[]
}

/** The node within its brackets. */
export function bare(node: Node): Node {
  let inner = node
  while (inner.type === 'bracket') inner = inner.inner
  return inner
}

export function joined(a: SourceRange, b: SourceRange): SourceRange {
  return { from: Math.min(a.from, b.from), to: Math.max(a.to, b.to) }
}
