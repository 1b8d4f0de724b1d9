/**
 * The calculation engine: lines of text in, values, verdicts and typeset mathematics out.
 *
 * Pure: no clock, no chance, no locale, nothing outside `shared/engine` but a parser and elementary
 * functions. What it is given and what it returns is plain data.
 */
import { resolve } from './check/resolve'
import { Fault } from './fault'
import { usageOf } from './functions'
import { Sheet } from './graph/sheet'
import type { Edited } from './graph/sheet'
import { responseFigures, stepFigures } from './graph/sweep'
import { unitWords } from './quantity/unitTable'
import { parseLine } from './syntax/parse'
import { CONSTANT_NAMES, FUNCTION_NAMES } from './syntax/words'
import type { ToleranceProgress, ToleranceRequest, ToleranceResult } from './tolerance/request'
import { runTolerance } from './tolerance/run'
import { typesetTree } from './typeset/formula'
import { nameLatex } from './typeset/names'
import type { EngineSettings, LineResult, Problem, ResponseFigures, ResponseRequest, SheetInput, SheetResult, StepFigures, StepRequest } from './types'

export type * from './types'
export type { Edited } from './graph/sheet'
export type * from './tolerance/request'
export type { Json } from './graph/recorded'
export { sheetCautions } from './cautions'
export type { CautionBlock, SheetCaution } from './cautions'
export { recordedResults } from './graph/recorded'
export { statedAs, unitScale } from './graph/units'
export type { Stated, UnitScale } from './graph/units'
export { LIMITS } from './limits'

/** Changes whenever a recorded result could come out differently. */
export const ENGINE_VERSION = '1.1.0'

/** The result of a further expression; it is no line and has no id. */
export type ExpressionResult = Omit<LineResult, 'id'>

export interface Completion {
  /** What is put in place of the prefix. */
  text: string
  kind: 'name' | 'function' | 'constant' | 'unit'
  /** How a function is called. */
  usage?: string
}

export interface SheetEngine {
  /** Evaluates the whole sheet; lines that have not changed, nor what they depend on, are kept from the last call. */
  evaluate(input: SheetInput): SheetResult
  /** The same, but results are made only of what changed, and only when they are asked for. */
  update(input: SheetInput): Edited
  /**
   * Puts another text in place of one line's and computes only that line and those that rest on it.
   * Throws where the last evaluation had no line of that id.
   */
  edit(id: string, source: string): Edited
  /** An expression in the scope after the last line of the last evaluation. */
  evaluateExpression(source: string): ExpressionResult
  /** Curves and figures of a transfer function of the last evaluation. */
  response(request: ResponseRequest): ResponseFigures
  step(request: StepRequest): StepFigures
  /** A tolerance analysis in the scope of the last evaluation, in slices: it may be left between two of them. */
  tolerance(request: ToleranceRequest): Generator<ToleranceProgress, ToleranceResult>
  /** An expression as mathematics, without evaluation. */
  typesetExpression(source: string): { latex: string } | Problem
  /** Words that begin with the prefix: names of the sheet first, then functions, constants, units. */
  completions(prefix: string): Completion[]
  /** How many lines the last evaluation computed anew. */
  recomputed(): number
}

export function createSheetEngine(settings: EngineSettings): SheetEngine {
  const sheet = new Sheet()
  let digits = settings.significantDigits
  return {
    evaluate: (input) => {
      digits = input.settings.significantDigits
      return sheet.evaluate(input)
    },
    update: (input) => {
      digits = input.settings.significantDigits
      return sheet.update(input)
    },
    edit: (id, source) => sheet.edit(id, source),
    evaluateExpression: source => sheet.expression(source).result,
    response: request => responseFigures(sheet, request, digits),
    step: request => stepFigures(sheet, request, digits),
    tolerance: request => runTolerance(sheet, request, digits),
    typesetExpression: source => typesetExpression(source, sheet),
    completions: prefix => completionsOf(prefix, sheet.definedNames()),
    recomputed: () => sheet.recomputed,
  }
}

/** One evaluation without anything kept. */
export function evaluateSheet(input: SheetInput): SheetResult {
  return createSheetEngine(input.settings).evaluate(input)
}

function typesetExpression(source: string, sheet: Sheet): { latex: string } | Problem {
  try {
    const line = parseLine(source)
    if (!line.body) return { latex: '' }
    const parameters = line.define?.parameters?.map(parameter => parameter.name) ?? []
    const laplace = parameters.includes('s')
    const tree = resolve(line.body, { laplace, isName: word => parameters.includes(word) || sheet.lookup(word) !== undefined })
    const name = line.define ? `${nameLatex(line.define.name)}${parameters.length > 0 ? `\\left(${parameters.map(nameLatex).join(',\\ ')}\\right)` : ''} = ` : ''
    return { latex: name + typesetTree(tree) }
  }
  catch (error) {
    if (error instanceof Fault) return error.problem
    throw error
  }
}

const COMPLETIONS_AT_MOST = 40

function completionsOf(prefix: string, names: readonly string[]): Completion[] {
  if (prefix === '') return []
  const starts = (word: string) => word.startsWith(prefix) && word !== prefix
  const found: Completion[] = names.filter(starts).map(text => ({ text, kind: 'name' }))
  for (const text of FUNCTION_NAMES.filter(starts)) {
    const usage = usageOf(text)
    found.push({ text, kind: 'function', ...(usage === undefined ? {} : { usage }) })
  }
  found.push(...CONSTANT_NAMES.filter(starts).map((text): Completion => ({ text, kind: 'constant' })))
  found.push(...unitWords().filter(starts).map((text): Completion => ({ text, kind: 'unit' })))
  return found.slice(0, COMPLETIONS_AT_MOST)
}
