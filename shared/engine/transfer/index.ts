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
