/** The values with a tolerance as parts: what each may be over its limits, temperature and life. */
import type { Variable } from '../graph/evaluation'
import { exp, TWO_PI } from '../numeric/math'
import { normalQuantile, normalTail } from '../numeric/normal'
import type { Distribution, Range, ToleranceInput, ToleranceRequest } from './request'

export interface Part {
  variable: Variable
  distribution: Distribution
  sigmas: number
  /** Of the standard normal distribution below the lower limit. */
  tail: number
  /** 1/K */
  coefficient: Range
  /** As a part of the value. */
  ageing: Range
  /** Number of its batch; a part without one is a batch of its own. */
  batch: number
}

export interface Model {
  parts: Part[]
  variables: Variable[]
  batches: number
  /** Temperature less its reference, K. */
  rise: Range
  /** Whether anything but the tolerances of independent parts moves a value. */
  plain: boolean
  /** Whether temperature moves a value. */
  warm: boolean
}

const NONE: Range = { low: 0, high: 0 }
const USUAL_SIGMAS = 3
const PPM = 1e-6
const PERCENT = 0.01

export function modelOf(variables: readonly Variable[], request: ToleranceRequest): Model {
  const settings = new Map(request.inputs.map(input => [input.name, input]))
  const batches = new Map<string, number>()
  const parts = variables.map((variable) => {
    const input = settings.get(variable.name)
    const key = input?.batch ? `batch ${input.batch}` : `alone ${variable.name}`
    if (!batches.has(key)) batches.set(key, batches.size)
    return partOf(variable, input, batches.get(key) ?? 0)
  })
  const { temperature } = request
  const rise = temperature ? { low: temperature.low - temperature.reference, high: temperature.high - temperature.reference } : NONE
  const warm = (rise.low !== 0 || rise.high !== 0) && parts.some(part => !isNone(part.coefficient))
  const plain = !warm && batches.size === parts.length && parts.every(part => isNone(part.ageing))
  return { parts, variables: [...variables], batches: batches.size, rise, plain, warm }
}

function partOf(variable: Variable, input: ToleranceInput | undefined, batch: number): Part {
  const sigmas = input?.sigmas ?? USUAL_SIGMAS
  return {
    variable, batch, sigmas,
    distribution: input?.distribution ?? 'uniform',
    tail: normalTail(sigmas),
    coefficient: scaledRange(input?.coefficient, PPM),
    ageing: scaledRange(input?.ageing, PERCENT),
  }
}

const isNone = (range: Range) => range.low === 0 && range.high === 0
const scaledRange = (range: Range | undefined, unit: number): Range => range ? { low: range.low * unit, high: range.high * unit } : NONE

/** A value that started at `initial`, warmed by `rise` kelvin and aged. */
export function agedValue(initial: number, coefficient: number, rise: number, ageing: number): number {
  return initial * (1 + coefficient * rise) * (1 + ageing)
}

/** All that a part may be at a temperature: initial tolerance, coefficient and ageing at their worst together. */
export function limitsAt({ variable, coefficient, ageing }: Part, rise: number): Range {
  let [low, high] = [Infinity, -Infinity]
  for (const initial of [variable.low, variable.high]) {
    for (const slope of [coefficient.low, coefficient.high]) {
      for (const age of [ageing.low, ageing.high]) {
        const value = agedValue(initial, slope, rise, age)
        low = Math.min(low, value)
        high = Math.max(high, value)
      }
    }
  }
  return { low, high }
}

/**
 * Initial value of which a part p of all are below. The limits of a normal distribution are `sigmas`
 * standard deviations from the nominal value, each side its own where the limits are unequal.
 */
export function initialAt({ variable, distribution, sigmas, tail }: Part, p: number): number {
  const { nominal, low, high } = variable
  if (distribution === 'uniform') return low + (high - low) * p
  const z = normalQuantile(distribution === 'normal' ? p : tail + p * (1 - 2 * tail)) / sigmas
  return z < 0 ? nominal + z * (nominal - low) : nominal + z * (high - nominal)
}

/** Standard deviation of the initial value as a part of half its range, for limits that lie evenly. */
export function spreadOf({ distribution, sigmas, tail }: Part): number {
  if (distribution === 'uniform') return 1 / Math.sqrt(3)
  if (distribution === 'normal') return 1 / sigmas
  const density = exp(-sigmas * sigmas / 2) / Math.sqrt(TWO_PI)
  return Math.sqrt(1 - 2 * sigmas * density / (1 - 2 * tail)) / sigmas
}
