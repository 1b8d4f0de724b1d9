/** A compiled line is evaluated, judged and typeset. */
import { childrenOf } from '../check/line'
import type { CompiledLine } from '../check/line'
import type { Resolved } from '../check/resolved'
import type { Entity, Scope } from '../check/scope'
import type { Term } from '../check/term'
import { warning } from '../fault'
import type { ParsedLine } from '../syntax/node'
import { typesetTree } from '../typeset/formula'
import { nameLatex } from '../typeset/names'
import type { LineResult, Problem } from '../types'
import type { Computed, LineRequest } from './record'
import { remarkOf } from './remark'
import { judge } from './requirement'
import { resultLatex, resultOf, valueInFormula } from './result'
import { transferResult } from './transferResult'

/** What differs between the kinds of line. */
interface Part {
  fields: Pick<LineResult, 'kind' | 'value' | 'requirement' | 'remark'>
  entity?: Entity
  result?: string
}

export function finishLine(request: LineRequest, parsed: ParsedLine, compiled: CompiledLine, problems: Problem[]): Computed {
  const uses = usesOf(compiled, request.scope)
  const part = partOf(request, parsed, compiled, uses, problems)
  const status = problems.some(problem => problem.severity === 'warning') ? 'warning' as const : 'ok' as const
  return {
    result: {
      status, ...part.fields, problems, uses,
      typeset: typesetOf(request, parsed, compiled.tree, part.result, compiled.type === 'value' ? compiled.tolerance : undefined),
      ...(parsed.define ? { defines: parsed.define.name } : {}),
      ...(parsed.note === undefined ? {} : { note: parsed.note }),
    },
    ...(part.entity && parsed.define ? { entity: part.entity } : {}),
  }
}

function partOf(request: LineRequest, parsed: ParsedLine, compiled: CompiledLine, uses: string[], problems: Problem[]): Part {
  const { evaluation, digits } = request
  switch (compiled.type) {
    case 'value': return valuePart(compiled.term, compiled.tree, request)
    case 'transfer': {
      const { value, notices } = transferResult(compiled.term, digits)
      for (const notice of notices) problems.push(warning(notice.code, notice.message, undefined, compiled.tree.at))
      return { fields: { kind: 'transfer', value }, entity: { type: 'transfer', term: compiled.term } }
    }
    case 'function': return { fields: { kind: 'function', value: { type: 'function', parameters: [...compiled.entity.parameters] } }, entity: compiled.entity }
    case 'requirement': {
      const subject = parsed.note !== undefined && parsed.note !== '' ? parsed.note : request.source.split('#')[0]?.trim() ?? ''
      const { relations } = compiled.condition
      const requirement = judge({ relations, subject, untoleranced: request.untoleranced(uses), evaluation, digits })
      const remark = remarkOf(compiled.tree, compiled.condition.terms, digits)
      return { fields: { kind: 'requirement', requirement, ...(remark === undefined ? {} : { remark }) } }
    }
  }
}

function valuePart(term: Term, tree: Resolved, { evaluation, digits }: LineRequest): Part {
  const value = resultOf({ term, evaluation, digits })
  const result = resultLatex(value)
  const remark = remarkOf(tree, [term], digits)
  return { fields: { kind: 'value', value, ...(remark === undefined ? {} : { remark }) }, entity: { type: 'value', term }, ...(result === undefined ? {} : { result }) }
}

/** Names that a line uses directly, in order of first use. */
function usesOf(compiled: CompiledLine, scope: Scope): string[] {
  const names: string[] = []
  const visit = (node: Resolved) => {
    if ((node.type === 'name' || node.type === 'call') && scope.lookup(node.name) !== undefined && !names.includes(node.name)) names.push(node.name)
    childrenOf(node).forEach(visit)
  }
  visit(compiled.tree)
  if (compiled.type === 'value' && compiled.tolerance) visit(compiled.tolerance)
  return names
}

/** The line as a formula, the formula with its numbers, and the result. */
export function typesetOf(request: Pick<LineRequest, 'scope' | 'digits'>, parsed: ParsedLine, tree: Resolved, result: string | undefined, tolerance?: Resolved): LineResult['typeset'] {
  const left = leftSide(parsed)
  const right = rightSide(tree, tolerance, () => undefined)
  const numbers = rightSide(tree, tolerance, name => substituted(name, request, parsed))
  return {
    formula: left === '' ? right : `${left} = ${right}`,
    ...(numbers === right ? {} : { substituted: numbers }),
    ...(result === undefined ? {} : { result }),
  }
}

function leftSide({ define }: ParsedLine): string {
  if (!define) return ''
  const name = nameLatex(define.name)
  return define.parameters ? `${name}\\left(${define.parameters.map(parameter => nameLatex(parameter.name)).join(',\\ ')}\\right)` : name
}

type Substitute = Parameters<typeof typesetTree>[1]

function rightSide(tree: Resolved, tolerance: Resolved | undefined, substitute: NonNullable<Substitute>): string {
  const latex = typesetTree(tree, substitute)
  return tolerance ? `${latex} \\pm ${typesetTree(tolerance, substitute)}` : latex
}

function substituted(name: string, { scope, digits }: Pick<LineRequest, 'scope' | 'digits'>, parsed: ParsedLine): ReturnType<NonNullable<Substitute>> {
  if (parsed.define?.parameters?.some(parameter => parameter.name === name)) return undefined
  const entity = scope.lookup(name)
  return entity?.type === 'value' ? valueInFormula(entity.term, digits) : undefined
}
