/** Holds the results of a sheet against what a case expects. */
import { createSheetEngine, statedAs, unitScale } from '../../shared/engine'
import type { Bounds, ExpressionResult, ResultValue, SheetEngine, SheetResult } from '../../shared/engine'
import type { LineExpectation, RequirementExpectation, SheetCase, ValueExpectation } from './case'

/** Relative tolerance of an expectation that states none: double precision through a few operations. */
const DEFAULT_RELATIVE = 1e-9

export interface Outcome {
  failures: string[]
  /** Largest error in parts of its tolerance, with its own size. */
  worst: { share: number, error: number, kind: 'relative' | 'absolute' } | undefined
}

type Complex = readonly [number, number]

export function runCase(test: SheetCase): Outcome {
  const engine = createSheetEngine({ significantDigits: 4 })
  const sheet = engine.evaluate({ lines: test.lines.map((source, index) => ({ id: String(index + 1), source })), settings: { significantDigits: 4 } })
  const outcome: Outcome = { failures: [], worst: undefined }
  for (const expectation of test.expect) {
    if ('value' in expectation) checkValue(expectation, engine, outcome)
    else if ('line' in expectation) checkLine(expectation, sheet, outcome)
    else checkRequirement(expectation, sheet, outcome)
  }
  return outcome
}

function checkLine({ line, status }: LineExpectation, sheet: SheetResult, outcome: Outcome): void {
  const found = sheet.lines[line - 1]
  if (!found) outcome.failures.push(`line ${line}: the case has ${sheet.lines.length} lines`)
  else if (found.status !== status) outcome.failures.push(`line ${line}: ${found.status}, expected ${status}${reason(found)}`)
}

function reason(result: ExpressionResult): string {
  const [problem] = result.problems
  return problem ? ` (${problem.message})` : ''
}

function checkRequirement(expectation: RequirementExpectation, sheet: SheetResult, outcome: Outcome): void {
  const label = `requirement ${expectation.requirement}`
  const line = sheet.lines[expectation.requirement - 1]
  const requirement = line?.requirement
  if (!line || !requirement) {
    outcome.failures.push(`${label}: the line is no requirement with a verdict${line ? reason(line) : ''}`)
    return
  }
  if (expectation.verdict !== undefined && requirement.verdict !== expectation.verdict) outcome.failures.push(`${label}: ${requirement.verdict}, expected ${expectation.verdict}`)
  if (expectation.margin === undefined) return
  const stated = requirement.marginIn
  if (!stated) {
    outcome.failures.push(`${label}: its margin has no unit`)
    return
  }
  const scale = unitScale(expectation.unit, stated)
  if ('code' in scale) outcome.failures.push(`${label}: margin: ${scale.message}`)
  else compareNumbers(`${label}: margin`, scale.from(requirement.marginSi), expectation.margin, expectation, outcome)
}

function checkValue(expectation: ValueExpectation, engine: SheetEngine, outcome: Outcome): void {
  const result = engine.evaluateExpression(expectation.value)
  const { value } = result
  if (result.status === 'error' || !value) {
    outcome.failures.push(`${expectation.value}: no value${reason(result)}`)
    return
  }
  if (expectation.is !== undefined) compareExpected(expectation, value, outcome)
  if (expectation.low !== undefined || expectation.high !== undefined) compareBounds(expectation, value, outcome)
}

function compareExpected(expectation: ValueExpectation, value: ResultValue, outcome: Outcome): void {
  const { is, value: label } = expectation
  if (typeof is === 'string') {
    const text = value.type === 'text' ? value.text : value.type === 'unbounded' ? 'unbounded' : undefined
    if (text !== is) outcome.failures.push(`${label}: ${text ?? `a ${value.type}`}, expected the text ${is}`)
    return
  }
  if (value.type === 'list') {
    compareList(expectation, value.items, outcome)
    return
  }
  const found = numberIn(value, expectation.unit)
  if (typeof found === 'string') outcome.failures.push(`${label}: ${found}`)
  else if (typeof is === 'number') compareComplex(label, found, [is, 0], expectation, outcome)
  else if (is && isPair(is)) compareComplex(label, found, is, expectation, outcome)
  else outcome.failures.push(`${label}: a single value, expected a list`)
}

function isPair(is: readonly unknown[]): is is Complex {
  return is.length === 2 && is.every(part => typeof part === 'number')
}

/** The number in the unit, or what is wrong. */
function numberIn(value: ResultValue, unit: string): Complex | string {
  const stated = statedAs(value)
  if (!stated) return `a ${value.type} has no number`
  const scale = unitScale(unit, stated)
  if ('code' in scale) return scale.message
  if (value.type === 'complex') return [scale.from(value.re), scale.from(value.im)]
  if (value.type === 'number') return [scale.from(value.si), 0]
  return value.type === 'level' ? [scale.from(value.db), 0] : 'no number'
}

/** A list in any order: every expected item takes the nearest found one that is left. */
function compareList(expectation: ValueExpectation, items: readonly ResultValue[], outcome: Outcome): void {
  const { is, value: label, unit } = expectation
  if (!Array.isArray(is)) {
    outcome.failures.push(`${label}: a list, expected a single value`)
    return
  }
  const found: Complex[] = []
  for (const item of items) {
    const number = numberIn(item, unit)
    if (typeof number === 'string') {
      outcome.failures.push(`${label}: ${number}`)
      return
    }
    found.push(number)
  }
  const expected = is.map((item): Complex => typeof item === 'number' ? [item, 0] : item)
  if (expected.length !== found.length) {
    outcome.failures.push(`${label}: ${found.length} items, expected ${expected.length}`)
    return
  }
  for (const [a, b] of matched(found, expected)) compareComplex(label, a, b, expectation, outcome)
}

function distance(a: Complex, b: Complex): number {
  return Math.hypot(a[0] - b[0], a[1] - b[1])
}

/** Pairs by rising distance, so that each item is used once. */
function matched(found: readonly Complex[], expected: readonly Complex[]): [Complex, Complex][] {
  const pairs = found.flatMap((a, i) => expected.map((b, j) => ({ i, j, a, b, distance: distance(a, b) }))).sort((x, y) => x.distance - y.distance)
  const usedFound = new Set<number>()
  const usedExpected = new Set<number>()
  const result: [Complex, Complex][] = []
  for (const { i, j, a, b } of pairs) {
    if (usedFound.has(i) || usedExpected.has(j)) continue
    usedFound.add(i)
    usedExpected.add(j)
    result.push([a, b])
  }
  return result
}

function compareBounds(expectation: ValueExpectation, value: ResultValue, outcome: Outcome): void {
  const { value: label, unit } = expectation
  const stated = statedAs(value)
  if (!stated || value.type === 'complex' || value.type === 'list') {
    outcome.failures.push(`${label}: a ${value.type} has no bounds`)
    return
  }
  const scale = unitScale(unit, stated)
  if ('code' in scale) {
    outcome.failures.push(`${label}: ${scale.message}`)
    return
  }
  const nominal = value.type === 'number' ? value.si : value.type === 'level' ? value.db : NaN
  const bounds: Pick<Bounds, 'low' | 'high'> = 'bounds' in value && value.bounds ? value.bounds : { low: nominal, high: nominal }
  for (const side of ['low', 'high'] as const) {
    const limit = expectation[side]
    if (limit !== undefined) compareNumbers(`${label}: ${side}`, scale.from(bounds[side]), limit, expectation, outcome)
  }
}

interface Tolerances { relative?: number | undefined, absolute?: number | undefined }

function compareNumbers(label: string, found: number, expected: number, tolerances: Tolerances, outcome: Outcome): void {
  compareComplex(label, [found, 0], [expected, 0], tolerances, outcome)
}

/** Holds where it is within either stated tolerance. */
function compareComplex(label: string, found: Complex, expected: Complex, tolerances: Tolerances, outcome: Outcome): void {
  const error = distance(found, expected)
  const size = Math.hypot(...expected)
  const { absolute } = tolerances
  const relative = tolerances.relative ?? (absolute === undefined ? DEFAULT_RELATIVE : undefined)
  const shares = [
    ...(relative === undefined ? [] : [{ kind: 'relative' as const, error: size === 0 ? error : error / size, share: share(error, relative * size) }]),
    ...(absolute === undefined ? [] : [{ kind: 'absolute' as const, error, share: share(error, absolute) }]),
  ]
  const best = shares.reduce((a, b) => b.share < a.share ? b : a)
  if (!outcome.worst || best.share > outcome.worst.share) outcome.worst = best
  if (best.share <= 1) return
  const shown = (x: Complex) => x[1] === 0 ? String(x[0]) : `${x[0]} ${x[1] < 0 ? '-' : '+'} ${Math.abs(x[1])}i`
  outcome.failures.push(`${label}: ${shown(found)}, expected ${shown(expected)} (${best.kind} error ${best.error.toExponential(1)})`)
}

function share(error: number, allowed: number): number {
  if (Number.isNaN(error)) return Infinity
  if (error === 0) return 0
  return allowed === 0 ? Infinity : error / allowed
}
