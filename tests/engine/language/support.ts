/** Short ways to say what a line should come to. */
import { createSheetEngine, statedAs, unitScale } from '../../../shared/engine'
import type { ExpressionResult, LineResult, ResultValue, SheetResult } from '../../../shared/engine'

export const settings = { significantDigits: 4 }

export function inputOf(lines: readonly string[]) {
  return { lines: lines.map((source, index) => ({ id: `l${index + 1}`, source })), settings }
}

export function sheet(...lines: string[]): SheetResult {
  return createSheetEngine(settings).evaluate(inputOf(lines))
}

/** The last of the lines. */
export function last(...lines: string[]): LineResult {
  const result = sheet(...lines).lines.at(-1)
  if (!result) throw new Error('a line was expected')
  return result
}

/** An expression after the lines. */
export function expression(source: string, ...lines: string[]): ExpressionResult {
  const engine = createSheetEngine(settings)
  engine.evaluate(inputOf(lines))
  return engine.evaluateExpression(source)
}

/** The number of a result in a unit. */
export function numberOf(value: ResultValue | undefined, unit: string): number {
  const stated = value && statedAs(value)
  if (!value || !stated) throw new Error(`no number: ${JSON.stringify(value)}`)
  const scale = unitScale(unit, stated)
  if ('code' in scale) throw new Error(scale.message)
  if (value.type === 'number') return scale.from(value.si)
  if (value.type === 'level') return scale.from(value.db)
  throw new Error(`a ${value.type} is no real number`)
}

export function valueIn(unit: string, source: string, ...lines: string[]): number {
  const result = expression(source, ...lines)
  if (result.status === 'error') throw new Error(`${source}: ${result.problems[0]?.message}`)
  return numberOf(result.value, unit)
}

/** Worst-case bounds in a unit. */
export function boundsIn(unit: string, source: string, ...lines: string[]): { low: number, high: number, method: string } {
  const { value } = expression(source, ...lines)
  const stated = value && statedAs(value)
  if (!value || !stated || !('bounds' in value) || !value.bounds) throw new Error(`no bounds: ${source} ${JSON.stringify(value)}`)
  const scale = unitScale(unit, stated)
  if ('code' in scale) throw new Error(scale.message)
  return { low: scale.from(value.bounds.low), high: scale.from(value.bounds.high), method: value.bounds.method }
}

export interface Refusal { code: string, message: string, hint: string, at: string }

/** The error of the last line, with the text that it stands at. */
export function refusal(...lines: string[]): Refusal {
  const line = last(...lines)
  const problem = line.problems.find(found => found.severity === 'error')
  if (line.status !== 'error' || !problem) throw new Error(`no error in ${lines.at(-1)}: ${JSON.stringify(line.value)}`)
  const { code, message, hint = '', at } = problem
  return { code, message, hint, at: at ? (lines.at(-1) ?? '').slice(at.from, at.to) : '' }
}

export function warningsOf(...lines: string[]): string[] {
  return last(...lines).problems.filter(problem => problem.severity === 'warning').map(problem => problem.code)
}
