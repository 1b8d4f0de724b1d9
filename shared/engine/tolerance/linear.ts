/**
 * Root-sum-square by sensitivities, and the law of propagation of uncertainty (JCGM 100:2008, 5.1.2).
 * To first order about the nominal values; causes that are independent add as squares.
 */
import { asNumber } from '../check/term'
import type { Contribution } from './request'
import type { Model, Part } from './parts'
import { spreadOf } from './parts'
import type { Subject } from './subject'

/** One independent cause, as changes of all parts: to its limit, by one standard deviation, and of its mean. */
interface Cause { names: string[], cause: Contribution['cause'], limit: number[], standard: number[], shift: number[], batch?: number }

export interface LinearContribution extends Omit<Contribution, 'effect'> { effect: number }

export interface Linear { low: number, high: number, standard: number, contributions: LinearContribution[] }

const UNIFORM = 1 / Math.sqrt(3)
/** Part of a half range that the differences are taken over. */
const STEP = 1e-3
/** Part of a value for its relative sensitivity. */
const RELATIVE = 0.01

export function linearOf(subject: Subject, model: Model): Linear {
  const nominal = asNumber(subject.term.run())
  const rows = causesOf(model).map((cause) => {
    const slope = (direction: readonly number[]) => slopeAlong(subject, model, direction)
    return { cause, effect: slope(cause.limit), standard: slope(cause.standard), shift: slope(cause.shift) }
  })
  const squares = rows.reduce((sum, row) => sum + row.effect * row.effect, 0)
  const variance = rows.reduce((sum, row) => sum + row.standard * row.standard, 0)
  const centre = nominal + rows.reduce((sum, row) => sum + row.shift, 0)
  const contributions = rows.map(({ cause, effect }): LinearContribution => ({
    names: cause.names, cause: cause.cause, effect: Math.abs(effect),
    share: squares > 0 ? effect * effect / squares : 0,
    ...sensitivityOf(subject, model, cause, nominal),
  }))
  contributions.sort((a, b) => b.effect - a.effect)
  return { low: centre - Math.sqrt(squares), high: centre + Math.sqrt(squares), standard: Math.sqrt(variance), contributions }
}

/** Derivative at the nominal values along a direction, by the five-point formula (Abramowitz and Stegun, 25.3.6). */
function slopeAlong({ term, evaluation }: Subject, { variables }: Model, direction: readonly number[]): number {
  if (direction.every(x => x === 0)) return 0
  const at = (t: number) => evaluation.atPoint(variables, variables.map((variable, i) => variable.nominal + t * (direction[i] ?? 0)), () => asNumber(term.run()))
  return (8 * (at(STEP) - at(-STEP)) - (at(2 * STEP) - at(-2 * STEP))) / (12 * STEP)
}

function sensitivityOf(subject: Subject, model: Model, cause: Cause, nominal: number): { sensitivity?: number } {
  const { kind } = subject.term
  if (cause.batch === undefined || kind.type !== 'number' || kind.point || nominal === 0) return {}
  const direction = model.parts.map(part => part.batch === cause.batch ? part.variable.nominal * RELATIVE : 0)
  return { sensitivity: slopeAlong(subject, model, direction) / (RELATIVE * nominal) }
}

function causesOf(model: Model): Cause[] {
  const causes: Cause[] = []
  for (let batch = 0; batch < model.batches; batch += 1) {
    const inBatch = (change: (part: Part) => number) => model.parts.map(part => part.batch === batch ? change(part) : 0)
    const names = model.parts.filter(part => part.batch === batch).map(part => part.variable.name)
    causes.push({
      names, batch, cause: 'tolerance',
      limit: inBatch(({ variable }) => (variable.high - variable.low) / 2),
      standard: inBatch(part => spreadOf(part) * (part.variable.high - part.variable.low) / 2),
      shift: inBatch(meanShift),
    })
    causes.push(...batchCauses(model, names, inBatch))
  }
  if (model.warm) causes.push(commonWarmth(model))
  return causes.filter(cause => cause.limit.some(x => x !== 0) || cause.shift.some(x => x !== 0))
}

/** A uniform distribution has its mean amid unequal limits; a normal one is taken about its nominal value. */
function meanShift({ variable, distribution }: Part): number {
  return distribution === 'uniform' ? (variable.low + variable.high) / 2 - variable.nominal : 0
}

/** The unknown part of the temperature coefficient, and ageing. */
function batchCauses({ rise, warm }: Model, names: string[], inBatch: (change: (part: Part) => number) => number[]): Cause[] {
  const half = ({ low, high }: Part['ageing']) => (high - low) / 2
  const mean = ({ low, high }: Part['ageing']) => (high + low) / 2
  const most = Math.max(Math.abs(rise.low), Math.abs(rise.high))
  const meanSquare = (rise.low * rise.low + rise.low * rise.high + rise.high * rise.high) / 3
  const zero = inBatch(() => 0)
  const ageing: Cause = {
    names, cause: 'ageing',
    limit: inBatch(part => part.variable.nominal * half(part.ageing)),
    standard: inBatch(part => part.variable.nominal * half(part.ageing) * UNIFORM),
    shift: inBatch(part => part.variable.nominal * mean(part.ageing)),
  }
  if (!warm) return [ageing]
  return [ageing, {
    names, cause: 'temperature', shift: zero,
    limit: inBatch(part => part.variable.nominal * half(part.coefficient) * most),
    standard: inBatch(part => part.variable.nominal * half(part.coefficient) * UNIFORM * Math.sqrt(meanSquare)),
  }]
}

/** The known part of all temperature coefficients at the one temperature. */
function commonWarmth({ parts, rise }: Model): Cause {
  const mean = (part: Part) => part.variable.nominal * (part.coefficient.low + part.coefficient.high) / 2
  const half = (rise.high - rise.low) / 2
  return {
    names: parts.filter(part => mean(part) !== 0).map(part => part.variable.name), cause: 'temperature',
    limit: parts.map(part => mean(part) * half),
    standard: parts.map(part => mean(part) * half * UNIFORM),
    shift: parts.map(part => mean(part) * (rise.high + rise.low) / 2),
  }
}
