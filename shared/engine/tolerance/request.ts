/** What a tolerance analysis is asked for and what it gives: plain data. */
import type { Problem, Shown } from '../types'

export type Distribution = 'uniform' | 'normal' | 'truncated normal'

/** Limits of a parameter. */
export interface Range { low: number, high: number }

/** How one value with a tolerance is taken; a value that is not named is uniform, without temperature, ageing or batch. */
export interface ToleranceInput {
  name: string
  distribution: Distribution
  /** The limits of a normal distribution in standard deviations; 3 where left out. */
  sigmas?: number
  /** Temperature coefficient, ppm/K. ± 50 ppm/K is −50 to 50; a known coefficient has equal limits. */
  coefficient?: Range
  /** Change over life, percent. */
  ageing?: Range
  /** Parts of one batch lie at the same place between their limits. */
  batch?: string
}

export type ToleranceMethod = 'worst case' | 'root-sum-square' | 'random'

export interface ToleranceRequest {
  inputs: ToleranceInput[]
  /** Names, expressions or requirements, typed as in a line below the last one. */
  outputs: { id: string, source: string }[]
  methods: ToleranceMethod[]
  /** A whole number from 0 to 4294967295. */
  seed: number
  /** 100 to 100,000. */
  samples: number
  /** °C: the same for all parts; `reference` is where the values hold. */
  temperature?: { reference: number, low: number, high: number }
}

/** Samples drawn, or outputs searched, out of how many. */
export interface ToleranceProgress { done: number, of: number }

/** SI units, or dB for a level. */
export interface Figure { value: number, shown: Shown }

export interface Contribution {
  /** Names that it comes from: one, or those of a batch, or all at one temperature. */
  names: string[]
  cause: 'tolerance' | 'temperature' | 'ageing'
  /** Change of the output, to first order, at the limit. */
  effect: Figure
  /** Part of the sum of squares, 0 to 1. */
  share: number
  /** Relative change of the output over that of the value; left out where that has no meaning. */
  sensitivity?: number
}

export interface RootSumSquare {
  low: Figure
  high: Figure
  /** Standard uncertainty by the law of propagation (JCGM 100:2008, 5.1.2). */
  standard: Figure
  /** Ranked, the greatest first. */
  contributions: Contribution[]
}

export interface Drawn {
  mean: Figure
  deviation: Figure
  percentiles: { percent: number, figure: Figure }[]
  /** Bins of equal width from `low` to `high`. */
  histogram: { low: Figure, high: Figure, counts: number[] }
  /** Samples at which the output has no value; they count as not met. */
  undefinedSamples: number
  /** Of a requirement: the part met, with its 95 % interval. */
  yield?: { met: number, samples: number, part: number, low: number, high: number }
}

export interface ToleranceOutput {
  id: string
  source: string
  /** Of a requirement the margin is analysed. */
  kind: 'value' | 'requirement' | 'error'
  problems: Problem[]
  nominal?: Figure
  worst?: { low: Figure, high: Figure, method: 'proved' | 'searched' }
  rootSumSquare?: RootSumSquare
  random?: Drawn
}

export interface ToleranceResult {
  /** What is wrong with the request as a whole; then nothing was computed. */
  problems: Problem[]
  outputs: ToleranceOutput[]
}
