/** A line as mathematics: fractions, roots, powers, and the same with the numbers put in. */
import type { Resolved, ResolvedOf } from '../check/resolved'
import { within } from '../check/resolved'
import { isTight, unitLatex } from '../quantity/unitProduct'
import type { UnitProduct } from '../quantity/unitProduct'
import { functionLatex } from './functionNames'
import { nameLatex } from './names'

/** How tightly a piece holds together, loosest first. */
export enum Grip { Choice, Relation, Sum, Negative, Product, Quantity, Power, Atom }

export interface Piece {
  latex: string
  grip: Grip
  /** It begins with a digit or a sign: beside a product it needs a dot before it. */
  numeric: boolean
  /** It ends with a unit. */
  unitEnd?: boolean
}

/** A name's value as LaTeX, for the formula with numbers; undefined leaves the name. */
export type Substitute = (name: string) => { latex: string, grouped: boolean } | undefined

export function typesetTree(tree: Resolved, substitute: Substitute = () => undefined): string {
  return new Typesetter(substitute).piece(tree).latex
}

const RELATIONS = { '<': '<', '<=': '\\le', '>': '>', '>=': '\\ge' } as const

class Typesetter {
  constructor(private readonly substitute: Substitute) {}

  piece(node: Resolved): Piece {
    switch (node.type) {
      case 'number': return numberPiece(node.text)
      case 'constant': return { latex: node.name === 'pi' ? '\\pi ' : `\\mathrm{${node.name}}`, grip: Grip.Atom, numeric: false }
      case 'variable': return { latex: 's', grip: Grip.Atom, numeric: false }
      case 'name': return this.name(node.name)
      case 'series': return { latex: `\\text{${node.name}}`, grip: Grip.Atom, numeric: false }
      case 'unit': return { latex: unitLatex(node.unit), grip: Grip.Atom, numeric: false, unitEnd: true }
      case 'quantity': return this.quantity(node)
      case 'bracket': return this.bracket(node)
      case 'list': return { latex: `\\left[${node.items.map(item => this.piece(item).latex).join(',\\ ')}\\right]`, grip: Grip.Atom, numeric: false }
      case 'negate': return { latex: `-${this.held(node.inner, Grip.Product)}`, grip: Grip.Negative, numeric: true }
      case 'binary': return this.binary(node)
      case 'to': return this.piece(node.value)
      case 'compare': return { latex: node.sides.map((side, i) => (i > 0 ? ` ${RELATIONS[node.operators[i - 1] ?? '<']} ` : '') + this.piece(side).latex).join(''), grip: Grip.Relation, numeric: false }
      case 'choice': return this.choice(node)
      case 'call': return this.call(node)
    }
  }

  private name(name: string): Piece {
    const value = this.substitute(name)
    if (!value) return { latex: nameLatex(name), grip: Grip.Atom, numeric: false }
    const negative = value.latex.startsWith('-')
    return { latex: value.latex, grip: negative ? Grip.Negative : value.grouped ? Grip.Quantity : Grip.Atom, numeric: true, unitEnd: value.grouped }
  }

  private quantity(node: ResolvedOf<'quantity'>): Piece {
    const number = this.piece(node.number)
    return { latex: number.latex + spacedUnit(node.unit), grip: number.grip === Grip.Negative ? Grip.Negative : Grip.Quantity, numeric: true, unitEnd: true }
  }

  /** Brackets that the layout makes superfluous are left out by whoever lays out; here they stand. */
  private bracket(node: ResolvedOf<'bracket'>): Piece {
    const inner = this.piece(node.inner)
    if (inner.grip >= Grip.Power) return inner
    return { latex: `\\left(${inner.latex}\\right)`, grip: Grip.Atom, numeric: false }
  }

  /** In brackets where it does not hold together tightly enough. */
  private held(node: Resolved, grip: Grip): string {
    const piece = this.piece(node)
    return piece.grip < grip ? `\\left(${piece.latex}\\right)` : piece.latex
  }

  /** Without its brackets: the layout groups it. */
  private free(node: Resolved): string {
    return this.piece(within(node)).latex
  }

  private binary(node: ResolvedOf<'binary'>): Piece {
    switch (node.operator) {
      case '+': case '-': return this.sum(node)
      case '/': case './': return { latex: `\\frac{${this.free(node.left)}}{${this.free(node.right)}}`, grip: Grip.Atom, numeric: false }
      case '*': case '.*': return this.product(node)
      case '^': case '.^': return this.power(node)
    }
  }

  private sum(node: ResolvedOf<'binary'>): Piece {
    const left = this.piece(node.left)
    const right = this.piece(node.right)
    const bracketed = right.grip === Grip.Negative || (node.operator === '-' && right.grip <= Grip.Sum)
    return { latex: `${left.latex} ${node.operator} ${bracketed ? `\\left(${right.latex}\\right)` : right.latex}`, grip: Grip.Sum, numeric: left.numeric }
  }

  private product(node: ResolvedOf<'binary'>): Piece {
    const left = this.piece(node.left)
    const right = this.piece(node.right)
    const a = left.grip < Grip.Product && left.grip !== Grip.Negative ? `\\left(${left.latex}\\right)` : left.latex
    const b = right.grip < Grip.Product ? `\\left(${right.latex}\\right)` : right.latex
    const between = right.numeric && right.grip > Grip.Negative ? ' \\cdot ' : this.gap(node, left, right)
    return { latex: `${a}${between}${b}`, grip: left.grip === Grip.Negative ? Grip.Negative : Grip.Product, numeric: left.numeric, unitEnd: right.unitEnd === true }
  }

  /** Single letters stand side by side; longer names and functions get a thin space. */
  private gap(node: ResolvedOf<'binary'>, left: Piece, right: Piece): string {
    if (right.unitEnd && right.grip === Grip.Atom) return '\\,'
    if (left.unitEnd) return ' \\cdot '
    if (node.left.type === 'number' || left.latex.endsWith('\\pi ')) return ''
    return /\\mathit|\\operatorname|\\left|\\begin/.test(left.latex + right.latex) ? '\\,' : ' '
  }

  private power(node: ResolvedOf<'binary'>): Piece {
    const base = this.piece(node.left)
    const fraction = base.latex.startsWith('\\frac')
    const held = base.grip < Grip.Atom || fraction || node.left.type === 'call' ? `\\left(${base.latex}\\right)` : base.latex
    return { latex: `${held}^{${this.exponent(node.right)}}`, grip: Grip.Power, numeric: base.numeric && !held.startsWith('\\left') }
  }

  private exponent(node: Resolved): string {
    const inner = within(node)
    if (inner.type === 'binary' && inner.operator === '/') return `${this.held(within(inner.left), Grip.Product)}/${this.held(within(inner.right), Grip.Power)}`
    return this.piece(inner).latex
  }

  private choice(node: ResolvedOf<'choice'>): Piece {
    return { latex: `\\begin{cases}${this.piece(node.yes).latex} & ${this.free(node.condition)}\\\\ ${this.piece(node.no).latex} & \\text{otherwise}\\end{cases}`, grip: Grip.Choice, numeric: false }
  }

  private call(node: ResolvedOf<'call'>): Piece {
    const args = node.args.map(arg => this.free(arg))
    const latex = functionLatex(node.name, args) ?? `${nameLatex(node.name)}\\left(${args.join(',\\ ')}\\right)`
    return { latex, grip: node.name === 'parallel' ? Grip.Sum : Grip.Atom, numeric: false }
  }
}

/** `1.5e-3` as a power of ten. */
export function numberLatex(text: string): string {
  const [mantissa = text, exponent] = text.toLowerCase().split('e')
  if (exponent === undefined) return mantissa
  const power = `10^{${Number(exponent)}}`
  return Number(mantissa) === 1 ? power : `${mantissa}\\times ${power}`
}

function numberPiece(text: string): Piece {
  const latex = numberLatex(text)
  return { latex, grip: latex.includes('times') ? Grip.Product : Grip.Atom, numeric: true }
}

function spacedUnit(unit: UnitProduct): string {
  const latex = unitLatex(unit)
  return isTight(unit) ? latex : `\\,${latex}`
}
