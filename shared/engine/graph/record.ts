/** One line's part in the sheet: computed from its text and from what its words mean above it. */
import { compileLine } from '../check/line'
import type { Entity, Scope } from '../check/scope'
import type { CheckContext } from '../check/term'
import { Fault, fault, warning } from '../fault'
import { LIMITS } from '../limits'
import type { ParsedLine } from '../syntax/node'
import type { LineResult, Problem } from '../types'
import type { Evaluation } from './evaluation'
import { finishLine } from './finish'

export interface Computed {
  result: Omit<LineResult, 'id'>
  /** What the defined name means below; undefined for lines that define nothing. */
  entity?: Entity
}

export interface LineRequest {
  parsed: ParsedLine | Fault
  /** Text of the line, for the subject of a requirement. */
  source: string
  /** Name it would define, also where it cannot be read. */
  name: string | undefined
  /** Number of the line, from 1. */
  line: number
  scope: Scope
  /** Line of the first definition, if this is a second one. */
  firstDefinition: number | undefined
  evaluation: Evaluation
  digits: number
  /** Names without a tolerance that the given names rest on. */
  untoleranced: (names: readonly string[]) => string[]
}

export function computeLine(request: LineRequest): Computed {
  const { parsed } = request
  if (parsed instanceof Fault) return failed(request, parsed.problem, [])
  if (!parsed.body) return empty(parsed)
  const problems: Problem[] = []
  try {
    if (request.firstDefinition !== undefined) throw secondDefinition(parsed, request.firstDefinition)
    const compiled = compileLine(parsed, request.scope, contextOf(request, problems))
    return finishLine(request, parsed, compiled, problems)
  }
  catch (error) {
    return failed(request, problemOf(error), problems)
  }
}

function problemOf(error: unknown): Problem {
  if (error instanceof Fault) return error.problem
  if (error instanceof RangeError) return fault('too-deep', 'This line is nested too deeply to be computed.', 'Give parts of it lines and names of their own.').problem
  throw error
}

function contextOf({ evaluation }: LineRequest, problems: Problem[]): CheckContext {
  let nodes = 0
  evaluation.startLine()
  return {
    evaluation,
    countNode: () => {
      nodes += 1
      if (nodes > LIMITS.compiledNodes) throw fault('too-much-work', 'This line takes too much work to compute.', 'Call fewer functions within functions.')
    },
    warn: (code, message, hint, at) => {
      if (!problems.some(problem => problem.code === code && problem.at?.from === at.from)) problems.push(warning(code, message, hint, at))
    },
  }
}

function secondDefinition(parsed: ParsedLine, first: number): Fault {
  const name = parsed.define?.name ?? ''
  return fault('defined-twice', `\`${name}\` is defined already, in line ${first}.`, `Choose another name, such as \`${name}_2\`, or change line ${first}.`, parsed.define?.at)
}

function empty(parsed: ParsedLine): Computed {
  return { result: { status: 'ok', kind: parsed.note === undefined ? 'empty' : 'note', problems: [], uses: [], typeset: {}, ...noteOf(parsed) } }
}

const noteOf = (parsed: ParsedLine) => parsed.note === undefined ? {} : { note: parsed.note }

function failed(request: LineRequest, problem: Problem, warnings: Problem[]): Computed {
  const { parsed, name, line } = request
  const readable = parsed instanceof Fault ? undefined : parsed
  const uses = readable ? [...new Set(readable.words)].filter(word => word !== name && request.scope.lookup(word) !== undefined) : []
  const defines = name === undefined ? {} : { defines: name }
  return {
    result: { status: 'error', kind: 'error', problems: [problem, ...warnings], uses, typeset: {}, ...defines, ...(readable ? noteOf(readable) : {}) },
    ...(name === undefined || request.firstDefinition !== undefined ? {} : { entity: { type: 'failed', line } as const }),
  }
}
