/** Roots, exponentials, logarithms and rounding. */
import { laplaceFunction } from '../check/laplace'
import { finite, finiteComplex } from '../check/products'
import { temperatureMisuse } from '../check/sums'
import type { Term, Value } from '../check/term'
import { asComplex, asNumber } from '../check/term'
import * as C from '../numeric/complex'
import * as M from '../numeric/math'
import { isNone, raised } from '../quantity/dimension'
import type { NumberKind } from '../quantity/kind'
import { COUNT, general, number } from '../quantity/kind'
import type { Dual } from '../tolerance/dual'
import { exponentialDual, interval, logarithmDual, multiplyDual, constantDual, powerDual, risingDual, rootDual } from '../tolerance/dual'
import type { Builtin, Call } from './call'
import { argument, domainFault, laplaceArgument, mapped, numberKindOf, plainArgument, wrongKind } from './call'

interface Elementary {
  usage: string
  /** Power to which the dimension is raised; absent where the argument must be a plain number. */
  exponent?: number
  real: (x: number, call: Call) => number
  complex?: (z: C.Complex) => C.Complex
  dual?: (x: Dual) => Dual
}

function elementary(spec: Elementary): Builtin {
  return { arity: [1, 1], usage: spec.usage, check: call => checkElementary(spec, call) }
}

function checkElementary(spec: Elementary, call: Call): Term {
  const term = argument(call, 0)
  const { complex } = spec
  if (laplaceArgument(term)) {
    if (!complex) throw wrongKind(call, term, 'a value')
    if (spec.exponent === undefined && !isNone(term.kind.dimension)) throw wrongKind(call, term, 'a plain function of s', 'Multiply `s` by a time: `exp(-s*T)`.')
    return laplaceFunction(term, raised(term.kind.dimension, spec.exponent ?? 0), complex, call.at)
  }
  const kind = numberKindOf(call, 0)
  if (kind.point) throw temperatureMisuse(call.at)
  if (spec.exponent === undefined && !isNone(kind.dimension)) throw wrongKind(call, term, 'a plain number', 'Divide it by a value of the same unit.')
  if (kind.complex && !complex) throw wrongKind(call, term, 'a real value', 'Take `abs(x)`, `re(x)` or `im(x)`.')
  return mapped(term, call.at, { kind: resultKind(spec, kind), ...closures(spec, kind, call), effort: 4 })
}

function resultKind(spec: Elementary, kind: NumberKind): NumberKind {
  if (spec.exponent === undefined) return number(COUNT.dimension, { complex: kind.complex, trace: { ...kind.trace, pi: false, overPi: false, literal: false } })
  return number(raised(kind.dimension, spec.exponent), {
    complex: kind.complex, trace: kind.trace, ...(kind.mark && { mark: kind.mark }),
  })
}

function closures(spec: Elementary, kind: NumberKind, call: Call): { apply: (x: Value) => Value, dual?: (x: Dual) => Dual } {
  const { complex, real, dual } = spec
  if (kind.complex && complex) return { apply: x => finiteComplex(complex(asComplex(x)), call.at) }
  return { apply: x => finite(real(asNumber(x), call), COUNT, call.at), ...(dual ? { dual } : {}) }
}

function aboveZero(x: number, call: Call): number {
  if (x > 0) return x
  throw domainFault(call, `\`${call.name}\` of ${x === 0 ? 'zero' : 'a negative number'} has no real value.`, x < 0 ? 'For a complex result write the argument as a complex number, such as `-1 + 0i`.' : undefined)
}

function complexCubeRoot(z: C.Complex): C.Complex {
  return z.re === 0 && z.im === 0 ? z : C.exponential(C.scale(C.logarithm(z), 1 / 3))
}

export const ELEMENTARY: Record<string, Builtin> = {
  sqrt: elementary({
    usage: 'sqrt(x)', exponent: 0.5, complex: C.squareRoot, dual: rootDual,
    real: (x, call) => {
      if (x < 0) throw domainFault(call, 'the root of a negative number is not real.', 'For a complex result write the argument as a complex number, such as `-1 + 0i`.')
      return Math.sqrt(x)
    },
  }),
  cbrt: elementary({ usage: 'cbrt(x)', exponent: 1 / 3, real: M.cbrt, complex: complexCubeRoot, dual: x => powerDual(x, 1 / 3) }),
  exp: elementary({ usage: 'exp(x)', real: M.exp, complex: C.exponential, dual: exponentialDual }),
  log10: elementary({ usage: 'log10(x)', real: (x, call) => M.log10(aboveZero(x, call)), complex: z => C.scale(C.logarithm(z), 1 / M.LN10), dual: x => multiplyDual(logarithmDual(x), constantDual(1 / M.LN10)) }),
  log2: elementary({ usage: 'log2(x)', real: (x, call) => M.log2(aboveZero(x, call)), complex: z => C.scale(C.logarithm(z), 1 / M.LN2), dual: x => multiplyDual(logarithmDual(x), constantDual(1 / M.LN2)) }),
  sinh: elementary({ usage: 'sinh(x)', real: M.sinh, complex: C.hyperbolicSine, dual: x => risingDual(x, M.sinh, slopeOfSinh(x)) }),
  cosh: elementary({ usage: 'cosh(x)', real: M.cosh, complex: C.hyperbolicCosine }),
  tanh: elementary({ usage: 'tanh(x)', real: M.tanh, complex: C.hyperbolicTangent, dual: x => risingDual(x, M.tanh, interval(0, 1)) }),
  log: { arity: [1, 2], usage: 'log(x) or log(x, base)', check: checkLog },
  floor: { arity: [1, 1], usage: 'floor(x)', check: call => rounding(call, x => nearWhole(x) ?? Math.floor(x)) },
  ceil: { arity: [1, 1], usage: 'ceil(x)', check: call => rounding(call, x => nearWhole(x) ?? Math.ceil(x)) },
  round: { arity: [1, 2], usage: 'round(x) or round(x, decimals)', check: checkRound },
  sign: { arity: [1, 1], usage: 'sign(x)', check: checkSign },
}

/** cosh lies between 1 and its value at the end that is farther from zero. */
function slopeOfSinh(x: Dual) {
  return interval(1, M.cosh(Math.max(Math.abs(x.value.low), Math.abs(x.value.high))))
}

const naturalLog = elementary({ usage: 'log(x)', real: (x, call) => M.ln(aboveZero(x, call)), complex: C.logarithm, dual: logarithmDual })

function checkLog(call: Call): Term {
  if (call.args.length === 1) return naturalLog.check(call)
  const base = plainArgument(call, 1)
  const { run } = base
  const divided = checkElementary({ usage: 'log(x, base)', real: (x, c) => M.ln(aboveZero(x, c)) / M.ln(aboveZero(asNumber(run()), c)) }, call)
  return { ...divided, variables: [...divided.variables, ...base.variables.filter(variable => !divided.variables.includes(variable))] }
}

/** A number that differs from a whole one by rounding only, as 0.3/0.1 does, counts as whole. */
function nearWhole(x: number): number | undefined {
  const whole = Math.round(x)
  return Math.abs(x - whole) <= 1e-12 * Math.max(Math.abs(x), Math.abs(whole)) ? whole : undefined
}

function rounding(call: Call, apply: (x: number) => number): Term {
  const kind = numberKindOf(call, 0)
  const term = argument(call, 0)
  if (kind.point || !isNone(kind.dimension)) throw wrongKind(call, term, 'a plain number', 'Divide by the unit first, and multiply by it afterwards: `round(x/(1 ohm))*(1 ohm)`.')
  if (kind.complex) throw wrongKind(call, term, 'a real number')
  return mapped(term, call.at, { kind: number(kind.dimension, { trace: general(kind).trace }), apply: x => apply(asNumber(x)) + 0 })
}

/** Half away from zero. */
function roundHalfAway(x: number): number {
  return x < 0 ? -Math.round(-x) : Math.round(x)
}

function checkRound(call: Call): Term {
  if (call.args.length === 1) return rounding(call, roundHalfAway)
  const decimals = plainArgument(call, 1).kind.constant
  if (decimals === undefined || !Number.isInteger(decimals) || decimals < 0 || decimals > 15) throw wrongKind(call, argument(call, 1), 'a whole number of decimals from 0 to 15')
  return rounding(call, x => Number(`${roundHalfAway(Number(`${x}e${decimals}`))}e-${decimals}`))
}

function checkSign(call: Call): Term {
  const kind = numberKindOf(call, 0)
  if (kind.point || kind.complex) throw wrongKind(call, argument(call, 0), 'a real value')
  return mapped(argument(call, 0), call.at, { kind: COUNT, apply: x => sign(asNumber(x)) })
}

function sign(x: number): number {
  return x > 0 ? 1 : x < 0 ? -1 : 0
}
