/** mathjs's nodes become ours, each with the range of its tokens, read in step from left to right. */
import type { MathNode } from 'mathjs'
import { fault } from '../fault'
import type { SourceRange } from '../types'
import type { BinaryOperator, Comparison, Node } from './node'
import { joined } from './node'
import type { Token } from './tokens'

const BINARY: ReadonlyMap<string, BinaryOperator> = new Map([
  ['add', '+'], ['subtract', '-'], ['multiply', '*'], ['divide', '/'], ['pow', '^'], ['dotMultiply', '.*'], ['dotDivide', './'], ['dotPow', '.^'],
])
const COMPARE: ReadonlyMap<string, Comparison> = new Map([['smaller', '<'], ['smallerEq', '<='], ['larger', '>'], ['largerEq', '>=']])

/** The parts of mathjs's node classes that are read here. */
interface ForeignNode {
  type: string
  value?: unknown
  name?: string
  fn?: unknown
  implicit?: boolean
  args?: ForeignNode[]
  content?: ForeignNode
  items?: ForeignNode[]
  condition?: ForeignNode
  trueExpr?: ForeignNode
  falseExpr?: ForeignNode
  conditionals?: string[]
  params?: ForeignNode[]
}

export function fromMathjs(root: MathNode, tokens: Token[]): Node {
  const walker = new Walker(tokens)
  const node = walker.node(root as unknown as ForeignNode)
  walker.finish()
  return node
}

class Walker {
  private next = 0
  constructor(private readonly tokens: Token[]) {}

  finish(): void {
    const left = this.tokens[this.next]
    if (left) throw this.misread(left)
  }

  private misread(token: Token | undefined) {
    return fault('syntax', `\`${token?.text ?? 'the end'}\` cannot stand here.`, 'Check the brackets and operators around it.', token?.at ?? this.tokens.at(-1)?.at)
  }

  /** Takes the next token, which must be the one that the tree says. */
  private take(text?: string): Token {
    const token = this.tokens[this.next]
    if (!token || (text !== undefined && token.text !== text)) throw this.misread(token)
    this.next += 1
    return token
  }

  node(foreign: ForeignNode): Node {
    switch (foreign.type) {
      case 'ConstantNode': return this.number(foreign)
      case 'SymbolNode': return this.name(foreign)
      case 'ParenthesisNode': return this.bracket(foreign)
      case 'FunctionNode': return this.call(foreign)
      case 'ArrayNode': return this.list(foreign)
      case 'OperatorNode': return this.operator(foreign)
      case 'RelationalNode': return this.chain(foreign)
      case 'ConditionalNode': return this.choice(foreign)
      default: throw fault('syntax', 'This cannot be read as a line of calculation.', 'Use numbers, units, names, the operators + - * / ^, brackets and functions.', this.tokens[this.next]?.at)
    }
  }

  private number(foreign: ForeignNode): Node {
    const token = this.take()
    if (token.type !== 'number' || typeof foreign.value !== 'number') throw this.misread(token)
    return { type: 'number', value: Number(token.text), text: token.text, at: token.at }
  }

  private name(foreign: ForeignNode): Node {
    const token = this.take(foreign.name)
    return { type: 'name', name: token.text, at: token.at }
  }

  private bracket(foreign: ForeignNode): Node {
    const open = this.take('(')
    const inner = this.child(foreign.content)
    return { type: 'bracket', inner, at: joined(open.at, this.take(')').at) }
  }

  private child(foreign: ForeignNode | undefined): Node {
    if (!foreign) throw this.misread(this.tokens[this.next])
    return this.node(foreign)
  }

  private call(foreign: ForeignNode): Node {
    const name = this.take()
    if (name.type !== 'word') throw this.misread(name)
    this.take('(')
    const args = this.separated(foreign.args ?? [])
    return { type: 'call', name: name.text, nameAt: name.at, args, at: joined(name.at, this.take(')').at) }
  }

  private list(foreign: ForeignNode): Node {
    const open = this.take('[')
    const items = this.separated(foreign.items ?? [])
    return { type: 'list', items, at: joined(open.at, this.take(']').at) }
  }

  private separated(children: ForeignNode[]): Node[] {
    return children.map((child, index) => {
      if (index > 0) this.take(',')
      return this.node(child)
    })
  }

  private operator(foreign: ForeignNode): Node {
    const fn = typeof foreign.fn === 'string' ? foreign.fn : ''
    const [first, second] = foreign.args ?? []
    if (fn === 'unaryMinus') {
      const sign = this.take('-')
      const inner = this.child(first)
      return { type: 'negate', inner, at: joined(sign.at, inner.at) }
    }
    const left = this.child(first)
    if (fn === 'to') {
      this.take('to')
      const unit = this.child(second)
      return { type: 'to', value: left, unit, at: joined(left.at, unit.at) }
    }
    const compare = COMPARE.get(fn)
    if (compare) return this.comparison(left, compare, this.after(compare, second))
    const operator = BINARY.get(fn)
    if (!operator) throw this.misread(this.tokens[this.next])
    const implicit = foreign.implicit === true
    const right = implicit ? this.child(second) : this.after(operator, second)
    return { type: 'binary', operator, implicit, left, right, at: joined(left.at, right.at) }
  }

  private after(sign: string, foreign: ForeignNode | undefined): Node {
    this.take(sign)
    return this.child(foreign)
  }

  private comparison(left: Node, operator: Comparison, right: Node): Node {
    return { type: 'compare', operators: [operator], sides: [left, right], at: joined(left.at, right.at) }
  }

  private chain(foreign: ForeignNode): Node {
    const operators: Comparison[] = []
    const sides = (foreign.params ?? []).map((side, index) => {
      if (index > 0) operators.push(this.relation(foreign.conditionals?.[index - 1]))
      return this.node(side)
    })
    return { type: 'compare', operators, sides, at: span(sides) }
  }

  private relation(name: string | undefined): Comparison {
    const operator = COMPARE.get(name ?? '')
    if (!operator) throw this.misread(this.tokens[this.next])
    this.take(operator)
    return operator
  }

  private choice(foreign: ForeignNode): Node {
    const condition = this.child(foreign.condition)
    this.take('?')
    const yes = this.child(foreign.trueExpr)
    this.take(':')
    const no = this.child(foreign.falseExpr)
    return { type: 'choice', condition, yes, no, at: span([condition, no]) }
  }
}

function span(nodes: Node[]): SourceRange {
  return nodes.map(node => node.at).reduce(joined)
}
