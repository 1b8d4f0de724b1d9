/**
 * Transfer functions and their figures.
 *
 * Angular frequencies are in rad/s and s in 1/s throughout; a figure that the trade states in hertz
 * says so. Nothing here throws for what an engineer may write: a figure that does not exist is
 * `{ ok: false, code, message, hint? }`.
 */
export type { Notice, Outcome, Refusal } from './outcome'
export type { Factor, Rational } from './rational'
export { MAX_ORDER, denominatorDegree, isConstant, numeratorDegree, orderOf, refusedRational } from './rational'
export {
  add, compose, constant, divide, feedback, fromCoefficients, multiply, negate, parallel, power, reciprocal,
  series, subtract, toCoefficients, variable,
} from './operations'
export { evaluateRational, logModulus } from './evaluate'
export { analyse } from './analysis'
export type { Analysis, Point } from './analysis'
export { asymptotes, cornerFrequency, highSlope, lowSlope, poles, zeros } from './asymptotes'
export type { StraightLine } from './asymptotes'
export { gain, gainOverBand, magnitude } from './gain'
export type { BandPoint } from './gain'
export {
  attenuation, attenuationOverBand, bandwidth, cutoffFrequency, passbandReference, resonance, resonanceFrequency,
  resonancePeak, responseKind,
} from './passband'
export type { Attenuation, Reference, ResponseKind } from './passband'
export { groupDelay, phase } from './phase'
export { classify, dampingClass, dampingRatio, dominantSection, naturalFrequency, qualityFactor } from './section'
export type { DampingClass, Section } from './section'
export { overshoot, reachTime, riseTime, settlingTime, stepPeak } from './step-figures'
export type { StepPeak } from './step-figures'
export { impulseResponse, stepResponse } from './time-response'
export { gainMargin, phaseMargin } from './margins'
export type { Margin } from './margins'
export { factoredForm, standardForm } from './standard-form'
export type { FactoredForm, FirstOrderFactor, RootFactor, SecondOrderFactor, StandardFactor, StandardForm } from './standard-form'
export {
  generalGain, generalGainMargin, generalGroupDelay, generalMagnitude, generalPhase, refuseNotRational,
} from './general'
export type { FrequencyFunction } from './general'
export { generalAttenuation, generalCutoffFrequency, generalGainOverBand, generalPhaseMargin } from './general-gain'
export { automaticRange, curveMarks, frequencyCurve, generalFrequencyCurve } from './frequency-curve'
export type { CurveMark, FrequencyCurve, FrequencyRange } from './frequency-curve'
export { sampleResponse } from './sampling'
export { automaticDuration, stepCurve } from './step-curve'
export type { StepCurve } from './step-curve'
export { halfPowerEdges } from './passband'
