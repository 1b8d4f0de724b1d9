/** Trigonometry and the parts of complex numbers. */
import { laplaceFunction } from '../check/laplace'
import { finite, finiteComplex } from '../check/products'
import { agree, temperatureMisuse } from '../check/sums'
import type { Term } from '../check/term'
import { asComplex, asNumber } from '../check/term'
import * as C from '../numeric/complex'
import * as M from '../numeric/math'
import { NONE, isNone } from '../quantity/dimension'
import type { NumberKind } from '../quantity/kind'
import { COUNT, general, number } from '../quantity/kind'
import type { Dual } from '../tolerance/dual'
import { chained, interval } from '../tolerance/dual'
import type { Builtin, Call } from './call'
import { argument, computed, domainFault, laplaceArgument, mapped, numberKindOf, realArgument, wrongKind } from './call'

const RADIANS = number(NONE, { angle: 'rad' })

function ofAngle(real: (x: number) => number, complex: (z: C.Complex) => C.Complex): (call: Call) => Term {
  return (call) => {
    const term = argument(call, 0)
    if (laplaceArgument(term)) {
      if (!isNone(term.kind.dimension)) throw wrongKind(call, term, 'a plain function of s', 'Multiply `s` by a time.')
      return laplaceFunction(term, NONE, complex, call.at)
    }
    const kind = numberKindOf(call, 0)
    if (kind.point || !isNone(kind.dimension)) throw wrongKind(call, term, 'an angle', 'An angle is a plain number in radians, or has the unit `deg`.')
    warnOfRadians(call, term, kind)
    const result = number(NONE, { complex: kind.complex, trace: { ...kind.trace, pi: false, overPi: false, literal: false } })
    return kind.complex
      ? mapped(term, call.at, { kind: result, effort: 4, apply: x => finiteComplex(complex(asComplex(x)), call.at) })
      : mapped(term, call.at, { kind: result, effort: 4, apply: x => finite(real(asNumber(x)), COUNT, call.at) })
  }
}

/** L10: `sin(30)` is thirty radians. */
function warnOfRadians(call: Call, term: Term, kind: NumberKind): void {
  if (!kind.trace.literal || kind.angle || kind.zero || kind.constant === 0) return
  call.context.warn('angle-in-radians', `\`${call.name}\` takes this number as radians.`, 'Write the unit: `30 deg`, or `0.5 rad`.', term.at)
}

function toAngle(real: (x: number, call: Call) => number, complex: (z: C.Complex) => C.Complex, dual?: (x: Dual) => Dual): (call: Call) => Term {
  return (call) => {
    const term = argument(call, 0)
    const kind = numberKindOf(call, 0)
    if (kind.point || !isNone(kind.dimension)) throw wrongKind(call, term, 'a plain number', 'Divide it by a value of the same unit.')
    if (kind.complex) return mapped(term, call.at, { kind: number(NONE, { complex: true }), effort: 6, apply: x => finiteComplex(complex(asComplex(x)), call.at) })
    return mapped(term, call.at, { kind: RADIANS, effort: 4, apply: x => real(asNumber(x), call), ...(dual ? { dual } : {}) })
  }
}

function withinOne(f: (x: number) => number): (x: number, call: Call) => number {
  return (x, call) => {
    if (Math.abs(x) > 1) throw domainFault(call, `\`${call.name}\` takes a number from −1 to 1.`, 'For a complex result write the argument as a complex number, such as `2 + 0i`.')
    return f(x)
  }
}

/** asin z = −i·ln(iz + √(1 − z²)); NIST Digital Library of Mathematical Functions 4.23.19. */
function arcSine(z: C.Complex): C.Complex {
  const root = C.squareRoot(C.subtract(C.ONE, C.multiply(z, z)))
  return C.multiply({ re: 0, im: -1 }, C.logarithm(C.add(C.multiply(C.I, z), root)))
}

function arcCosine(z: C.Complex): C.Complex {
  return C.subtract({ re: M.PI / 2, im: 0 }, arcSine(z))
}

/** atan z = (i/2)·ln((i + z)/(i − z)); NIST Digital Library of Mathematical Functions 4.23.26. */
function arcTangent(z: C.Complex): C.Complex {
  return C.multiply({ re: 0, im: 0.5 }, C.logarithm(C.divide(C.add(C.I, z), C.subtract(C.I, z))))
}

/** Derivative 1/(1 + x²), between 0 and 1. */
function arcTangentDual(x: Dual): Dual {
  const far = Math.max(Math.abs(x.value.low), Math.abs(x.value.high))
  return chained(x, interval(M.atan(x.value.low), M.atan(x.value.high)), interval(1 / (1 + far * far), 1))
}

function part(real: (x: number) => number, complex: (z: C.Complex) => number, kindOf: (kind: NumberKind) => NumberKind): (call: Call) => Term {
  return (call) => {
    const kind = numberKindOf(call, 0)
    if (kind.point) throw temperatureMisuse(call.at)
    const result = kindOf({ ...general(kind), complex: false })
    const apply = kind.complex ? (z: C.Complex) => complex(z) : (z: C.Complex) => real(z.re)
    return mapped(argument(call, 0), call.at, { kind: result, effort: 2, apply: x => apply(asComplex(x)) })
  }
}

/** |x|: an interval that keeps its sign keeps its slopes. */
function absoluteDual(x: Dual): Dual {
  if (x.value.low >= 0) return x
  const sign = x.value.high <= 0 ? interval(-1, -1) : interval(-1, 1)
  const far = Math.max(Math.abs(x.value.low), Math.abs(x.value.high))
  const near = x.value.high <= 0 ? -x.value.high : 0
  return chained(x, { low: near, high: far }, sign)
}

function checkAbs(call: Call): Term {
  const term = part(Math.abs, C.modulus, kind => kind)(call)
  const inner = argument(call, 0).dual
  return inner && term.kind.type === 'number' ? { ...term, dual: () => absoluteDual(inner()) } : term
}

function checkConj(call: Call): Term {
  const kind = numberKindOf(call, 0)
  return mapped(argument(call, 0), call.at, { kind: general(kind), apply: x => kind.complex ? C.conjugate(asComplex(x)) : x })
}

function checkAtan2(call: Call): Term {
  const [y, x] = [realArgument(call, 0), realArgument(call, 1)]
  agree(y.kind, x.kind, 'compared', call.at)
  return computed(call, RADIANS, 4, ([a, b]) => M.atan2(a ?? NaN, b ?? NaN))
}

export const ANGLES: Record<string, Builtin> = {
  sin: { arity: [1, 1], usage: 'sin(angle)', check: ofAngle(M.sin, C.sine) },
  cos: { arity: [1, 1], usage: 'cos(angle)', check: ofAngle(M.cos, C.cosine) },
  tan: { arity: [1, 1], usage: 'tan(angle)', check: ofAngle(M.tan, C.tangent) },
  asin: { arity: [1, 1], usage: 'asin(x)', check: toAngle(withinOne(M.asin), arcSine) },
  acos: { arity: [1, 1], usage: 'acos(x)', check: toAngle(withinOne(M.acos), arcCosine) },
  atan: { arity: [1, 1], usage: 'atan(x)', check: toAngle(M.atan, arcTangent, arcTangentDual) },
  atan2: { arity: [2, 2], usage: 'atan2(y, x)', check: checkAtan2 },
  abs: { arity: [1, 1], usage: 'abs(x)', check: checkAbs },
  re: { arity: [1, 1], usage: 're(z)', check: part(x => x, z => z.re, kind => kind) },
  im: { arity: [1, 1], usage: 'im(z)', check: part(() => 0, z => z.im, kind => kind) },
  arg: { arity: [1, 1], usage: 'arg(z)', check: part(x => x < 0 ? M.PI : 0, C.argument, () => RADIANS) },
  conj: { arity: [1, 1], usage: 'conj(z)', check: checkConj },
}
