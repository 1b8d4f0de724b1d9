/** Fingerprints of what the deterministic functions return, to the last bit. Runs in Node and in a browser alike. */
import { createSheetEngine } from '../../../shared/engine'
import * as complex from '../../../shared/engine/numeric/complex'
import * as m from '../../../shared/engine/numeric/math'
import { rootsOf } from '../../../shared/engine/numeric/roots'
import {
  bandwidth, constant, divide, fromCoefficients, gain, groupDelay, multiply, overshoot, phase, poles, power, settlingTime, stepResponse,
} from '../../../shared/engine/transfer'

/** Arguments hashed for each elementary function. */
const COUNT = 100_000

/** FNV-1a over the halves of doubles, twice with different starts. */
class Fingerprint {
  private readonly number = new Float64Array(1)
  private readonly halves = new Uint32Array(this.number.buffer)
  private first = 0x811C9DC5
  private second = 0x9747B28C

  add(x: number): void {
    // Whatever its bits, not-a-number is one value.
    this.number[0] = x
    if (Number.isNaN(x)) this.halves.set([0, 0x7FF80000])
    for (const half of this.halves) {
      this.first = Math.imul(this.first ^ half, 0x01000193) >>> 0
      this.second = Math.imul((this.second ^ half) + (this.second >>> 15), 0x01000193) >>> 0
    }
  }

  toString(): string {
    return this.first.toString(16).padStart(8, '0') + this.second.toString(16).padStart(8, '0')
  }
}

/** D. H. Lehmer's generator with G. S. Fishman's multiplier 16807: the same sequence everywhere, in (0, 1). */
function sequence(seed: number): () => number {
  let state = seed
  return () => {
    state = state * 16807 % 2147483647
    return state / 2147483647
  }
}

/** Arguments of every size, of both signs, some of them whole. */
function argument(next: () => number): number {
  const size = m.exp((next() - 0.5) * 60)
  const x = next() < 0.5 ? size : -size
  return next() < 0.1 ? Math.round(x) : x
}

function unaryFingerprint(f: (x: number) => number, seed: number): string {
  const next = sequence(seed)
  const print = new Fingerprint()
  for (let k = 0; k < COUNT; k++) print.add(f(argument(next)))
  return print.toString()
}

function binaryFingerprint(f: (x: number, y: number) => number, seed: number): string {
  const next = sequence(seed)
  const print = new Fingerprint()
  for (let k = 0; k < COUNT; k++) print.add(f(argument(next), argument(next)))
  return print.toString()
}

function complexFingerprint(): string {
  const next = sequence(77)
  const print = new Fingerprint()
  for (let k = 0; k < 5_000; k++) {
    const a = { re: argument(next), im: argument(next) }
    const b = { re: argument(next), im: argument(next) }
    for (const z of [complex.divide(a, b), complex.squareRoot(a), complex.logarithm(b), complex.exponential({ re: next(), im: argument(next) })]) {
      print.add(z.re)
      print.add(z.im)
    }
  }
  return print.toString()
}

function rootFingerprint(): string {
  const next = sequence(99)
  const print = new Fingerprint()
  for (let k = 0; k < 300; k++) {
    const p = Array.from({ length: 2 + Math.floor(next() * 12) }, () => (next() - 0.5) * m.exp((next() - 0.5) * 20))
    for (const z of rootsOf(p)) {
      print.add(z.re)
      print.add(z.im)
    }
  }
  return print.toString()
}

function figureFingerprint(): string {
  const next = sequence(111)
  const print = new Fingerprint()
  const add = (outcome: { ok: true, value: number } | { ok: false }) => print.add(outcome.ok ? outcome.value : NaN)
  for (let k = 0; k < 200; k++) {
    const w = m.exp(next() * 20)
    let h = divide(constant(next()), fromCoefficients([1, 2 * next() / w, 1 / (w * w)]))
    if (next() < 0.5) h = multiply(h, power(fromCoefficients([1, next() / w]), -Math.ceil(next() * 3)))
    for (const figure of [gain, phase, groupDelay]) add(figure(h, w * next() * 3))
    add(bandwidth(h))
    add(overshoot(h))
    add(settlingTime(h, 0.02))
    add(stepResponse(h, 3 * next() / w))
    const found = poles(h)
    if (found.ok) for (const p of found.value) print.add(p.re + p.im)
  }
  return print.toString()
}

/** Every number of a tolerance analysis with all that moves a value. */
function toleranceFingerprint(): string {
  const engine = createSheetEngine({ significantDigits: 4 })
  const lines = ['R = 50 ohm ± 1 %', 'L = 10 mH ± 5 %', 'C = between(100 nF, 80 nF, 110 nF)', 'C_2 = 100 nF ± 10 %', 'H(s) = 1/(L*C*s^2 + R*(C + C_2)*s + 1)']
  engine.evaluate({ lines: lines.map((source, i) => ({ id: `l${i}`, source })), settings: { significantDigits: 4 } })
  const run = engine.tolerance({
    methods: ['worst case', 'root-sum-square', 'random'], seed: 2026, samples: 4000, temperature: { reference: 25, low: -40, high: 85 },
    outputs: [{ id: 'a', source: '1/(2*pi*sqrt(L*C)) to Hz' }, { id: 'b', source: 'gain(H, 4 kHz) <= 4 dB' }],
    inputs: [
      { name: 'R', distribution: 'normal', coefficient: { low: -50, high: 50 } }, { name: 'L', distribution: 'truncated normal', sigmas: 2, coefficient: { low: 100, high: 300 } },
      { name: 'C', distribution: 'normal', batch: 'film', ageing: { low: -3, high: 0 } }, { name: 'C_2', distribution: 'uniform', batch: 'film' },
    ],
  })
  const print = new Fingerprint()
  const visit = (part: unknown) => {
    if (typeof part === 'number') print.add(part)
    else if (typeof part === 'object' && part !== null) Object.values(part).forEach(visit)
  }
  let step = run.next()
  while (!step.done) step = run.next()
  visit(step.value)
  return print.toString()
}

/** One fingerprint a function, and one each for complex arithmetic, roots, figures and a tolerance analysis. */
export function fingerprints(): Record<string, string> {
  const unary = {
    sin: m.sin, cos: m.cos, tan: m.tan, asin: m.asin, acos: m.acos, atan: m.atan, exp: m.exp, expm1: m.expm1, ln: m.ln, log1p: m.log1p,
    log10: m.log10, log2: m.log2, sinh: m.sinh, cosh: m.cosh, tanh: m.tanh, cbrt: m.cbrt,
  }
  const binary = { atan2: m.atan2, pow: m.pow, hypot: m.hypot }
  const result: Record<string, string> = {}
  for (const [name, f] of Object.entries(unary)) result[name] = unaryFingerprint(f, 12_345)
  for (const [name, f] of Object.entries(binary)) result[name] = binaryFingerprint(f, 54_321)
  return { ...result, complex: complexFingerprint(), roots: rootFingerprint(), figures: figureFingerprint(), tolerance: toleranceFingerprint() }
}
