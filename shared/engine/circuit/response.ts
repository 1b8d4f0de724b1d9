/** The response of a circuit to one source at many frequencies. */
import type { Complex } from '../numeric/complex'
import type { Fault } from '../fault'
import { TWO_PI } from '../numeric/math'
import { ensureSolvable, singular } from './diagnosis'
import { branchForm, sweepForm } from './form'
import { pivotOrder } from './pivots'
import type { PivotOrder } from './pivots'
import type { Program, Workspace } from './program'
import { eliminate, programOf, substitute, workspaceOf } from './program'
import type { Equations } from './stamp'
import { equationsOf, excitation } from './stamp'
import type { Circuit, Output } from './types'

/** Complex values by output, then by frequency. */
export interface Response { readonly re: Float64Array, readonly im: Float64Array }

/** A pivot smaller than this part of the terms it came from calls for an order of its own at that frequency. */
const SUSPECT = 1e-6

interface Coefficients { readonly g: Float64Array, readonly c: Float64Array, readonly l: Float64Array }

/** The unknowns an output is made of. */
interface Terms { readonly plus: number, readonly minus: number }

function lookedElements(outputs: readonly Output[]): Set<string> {
  return new Set(outputs.flatMap(o => o.type === 'current' ? [o.element] : []))
}

function termsOf(equations: Equations, output: Output): Terms {
  if (output.type === 'current') return { plus: equations.branch(output.element)!, minus: -1 }
  return { plus: equations.node(output.nodes[0]) ?? -1, minus: equations.node(output.nodes[1]) ?? -1 }
}

function valuesAt({ g, c, l }: Coefficients, e: number, omega: number): { re: number, im: number } {
  return { re: g[e]!, im: omega * c[e]! - (l[e] === 0 ? 0 : l[e]! / omega) }
}

/** Everything that one circuit, source and set of outputs need, and nothing of a frequency. */
class Solver {
  private readonly coefficients: Coefficients
  private readonly sources: readonly { row: number, value: number }[]
  private readonly terms: readonly Terms[]
  private readonly wanted: readonly number[]
  private readonly size: number

  constructor(private readonly circuit: Circuit, private readonly equations: Equations, input: string, outputs: readonly Output[]) {
    const { entries } = equations
    this.size = equations.unknowns.length
    this.coefficients = { g: Float64Array.from(entries, e => e.g), c: Float64Array.from(entries, e => e.c), l: Float64Array.from(entries, e => e.l) }
    this.sources = excitation(circuit, equations, input)
    this.terms = outputs.map(o => termsOf(equations, o))
    this.wanted = [...new Set(this.terms.flatMap(t => [t.plus, t.minus]).filter(u => u >= 0))]
  }

  order(omega: number): PivotOrder {
    const coefficients = this.equations.entries.map(({ row, column }, e) => ({ row, column, ...valuesAt(this.coefficients, e, omega) }))
    return pivotOrder(this.size, coefficients, new Set(this.wanted.length < this.size / 2 ? this.wanted : []))
  }

  program(order: PivotOrder): Program {
    return programOf(order, this.size, this.equations.entries, this.sources.map(s => s.row), this.wanted)
  }

  singular(order: PivotOrder): Fault {
    return singular(this.circuit, this.equations, order.without)
  }

  /** Entries of the matrix that pivots stand on, −1 where a pivot came about on the way. */
  pivotEntries(program: Program): Int32Array {
    const at = new Map<number, number>()
    program.entrySlots.forEach((slot, e) => at.set(slot, e))
    return Int32Array.from({ length: program.pivots.length / 3 }, (_, k) => at.get(program.pivots[3 * k]!) ?? -1)
  }

  assemble(program: Program, { data }: Workspace, omega: number): void {
    const { g, c, l } = this.coefficients
    const { entrySlots, sourceSlots } = program
    const inverse = omega === 0 ? 0 : 1 / omega
    data.fill(0)
    for (let e = 0; e < entrySlots.length; e++) {
      const slot = 2 * entrySlots[e]!
      data[slot] = g[e]!
      data[slot + 1] = omega * c[e]! - inverse * l[e]!
    }
    for (let k = 0; k < sourceSlots.length; k++) data[2 * sourceSlots[k]!]! += this.sources[k]!.value
  }

  /** Whether a pivot has lost most of its digits at this frequency. */
  suspect(program: Program, { data }: Workspace, pivotEntries: Int32Array, omega: number): boolean {
    const { g, c, l } = this.coefficients
    const inverse = omega === 0 ? 0 : 1 / omega
    for (let k = 0; k < pivotEntries.length; k++) {
      const e = pivotEntries[k]!
      const slot = 2 * program.pivots[3 * k]!
      const size = Math.abs(data[slot]!) + Math.abs(data[slot + 1]!)
      if (e >= 0 && size < SUSPECT * (Math.abs(g[e]!) + omega * Math.abs(c[e]!) + inverse * Math.abs(l[e]!))) return true
      if (!(size > 0 && size < Infinity)) return true
    }
    return false
  }

  read(program: Program, { solution }: Workspace, into: Response, column: number, columns: number): void {
    const { pivotOf } = program
    for (const [k, { plus, minus }] of this.terms.entries()) {
      const at = k * columns + column
      into.re[at] = (plus < 0 ? 0 : solution[2 * pivotOf[plus]!]!) - (minus < 0 ? 0 : solution[2 * pivotOf[minus]!]!)
      into.im[at] = (plus < 0 ? 0 : solution[2 * pivotOf[plus]! + 1]!) - (minus < 0 ? 0 : solution[2 * pivotOf[minus]! + 1]!)
    }
  }

  /** One frequency with an order of its own. NaN where the circuit has no answer there: on an undamped pole. */
  alone(omega: number, into: Response, column: number, columns: number): void {
    const order = this.order(omega)
    if (order.without.length > 0) {
      for (const k of this.terms.keys()) into.re[k * columns + column] = into.im[k * columns + column] = NaN
      return
    }
    const program = this.program(order)
    const work = workspaceOf(program)
    this.assemble(program, work, omega)
    eliminate(program, work)
    substitute(program, work)
    this.read(program, work, into, column, columns)
  }
}

/** A frequency inside the sweep that is no round number, so that nothing cancels there by chance. */
function reference(low: number, high: number): number {
  return Math.sqrt(low) * Math.sqrt(high) * 1.0471975511965976
}

function sweep(solver: Solver, omegas: Float64Array, into: Response, low: number, high: number): void {
  const order = solver.order(reference(low, high))
  if (order.without.length > 0) throw solver.singular(order)
  const program = solver.program(order)
  const work = workspaceOf(program)
  const pivotEntries = solver.pivotEntries(program)
  for (let k = 0; k < omegas.length; k++) {
    const omega = omegas[k]!
    solver.assemble(program, work, omega)
    eliminate(program, work)
    if (solver.suspect(program, work, pivotEntries, omega)) {
      solver.alone(omega, into, k, omegas.length)
      continue
    }
    substitute(program, work)
    solver.read(program, work, into, k, omegas.length)
  }
}

/**
 * Outputs over the value of the source `input`, all other independent sources being zero.
 * @param omegas angular frequencies in rad/s, not negative
 * @returns output k at frequency n stands at index k·omegas.length + n; NaN on an undamped pole
 * @throws Fault where the circuit cannot be solved; it names the elements
 */
export function responseAt(circuit: Circuit, input: string, outputs: readonly Output[], omegas: Float64Array): Response {
  ensureSolvable(circuit, input, outputs)
  const into = { re: new Float64Array(outputs.length * omegas.length), im: new Float64Array(outputs.length * omegas.length) }
  let low = Infinity
  let high = 0
  for (const omega of omegas) {
    if (omega > 0) low = Math.min(low, omega)
    high = Math.max(high, omega)
  }
  const looked = lookedElements(outputs)
  if (omegas.includes(0) || high === 0) {
    const form = branchForm(circuit)
    const equations = equationsOf(circuit, { ...form, branched: e => looked.has(e.ref) || form.branched(e) })
    const solver = new Solver(circuit, equations, input, outputs)
    sweep(solver, omegas, into, high === 0 ? 1 : low, high === 0 ? 1 : high)
    return into
  }
  sweep(new Solver(circuit, equationsOf(circuit, sweepForm(circuit, low, high, looked)), input, outputs), omegas, into, low, high)
  return into
}

/** One output at frequencies in Hz. */
export function frequencyResponse(circuit: Circuit, input: string, output: Output, frequencies: readonly number[]): Complex[] {
  const { re, im } = responseAt(circuit, input, [output], Float64Array.from(frequencies, f => TWO_PI * f))
  return frequencies.map((_, k) => ({ re: re[k]!, im: im[k]! }))
}
