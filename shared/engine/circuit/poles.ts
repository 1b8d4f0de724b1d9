/** Natural frequencies of a circuit, and the zeros of one of its responses. */
import type { Complex } from '../numeric/complex'
import { log2, powerOfTwo } from '../numeric/math'
import { ensureSolvable, singular } from './diagnosis'
import { branchForm } from './form'
import type { Pencil } from './pencil'
import { finiteEigenvalues } from './pencil'
import { refined } from './refine'
import { unitsOf } from './scaling'
import type { Units } from './scaling'
import type { Equations } from './stamp'
import { equationsOf, excitation } from './stamp'
import type { Circuit, Output } from './types'

/** Larger pencils are left as the QR iteration gives them. */
const REFINED_UP_TO = 150

function unscaled(equations: Equations, size: number): Pencil {
  const square = () => Array.from({ length: size }, () => new Float64Array(size))
  const pencil = { g: square(), c: square() }
  for (const { row, column, g, c } of equations.entries) {
    pencil.g[row]![column]! += g
    pencil.c[row]![column]! += c
  }
  return pencil
}

/** Time in units of 1/rate, currents in units of 1/impedance, every row brought to a largest coefficient near 1. */
function scaled(pencil: Pencil, equations: Equations, { rate, impedance }: Units): Pencil {
  equations.unknowns.forEach((unknown, k) => {
    if (unknown.kind !== 'current') return
    for (const row of [...pencil.g, ...pencil.c]) row[k]! /= impedance
  })
  pencil.g.forEach((g, i) => {
    const c = pencil.c[i]!
    let largest = 0
    for (let j = 0; j < g.length; j++) {
      c[j]! *= rate
      largest = Math.max(largest, Math.abs(g[j]!), Math.abs(c[j]!))
    }
    if (largest === 0) return
    const factor = powerOfTwo(-Math.round(log2(largest)))
    for (let j = 0; j < g.length; j++) {
      g[j]! *= factor
      c[j]! *= factor
    }
  })
  return pencil
}

function rootsOfPencil(pencil: Pencil, rate: number): Complex[] | undefined {
  const found = finiteEigenvalues(pencil)
  if (!found) return undefined
  const sharp = pencil.g.length <= REFINED_UP_TO
  const roots: Complex[] = []
  for (const z of found) {
    if (z.im < 0) continue
    const root = sharp ? refined(pencil, z) : z
    roots.push({ re: root.re * rate, im: root.im * rate })
    if (root.im > 0) roots.push({ re: root.re * rate, im: -root.im * rate })
  }
  return roots
}

/**
 * All natural frequencies with the sources at zero, rad/s, each as often as it occurs, by rising modulus. Those
 * at zero are exact.
 * @throws Fault where the circuit cannot be solved
 */
export function polesOf(circuit: Circuit): Complex[] {
  ensureSolvable(circuit, undefined, [])
  const equations = equationsOf(circuit, branchForm(circuit))
  const units = unitsOf(circuit)
  const poles = rootsOfPencil(scaled(unscaled(equations, equations.unknowns.length), equations, units), units.rate)
  if (!poles) throw singular(circuit, equations, [])
  return poles
}

/**
 * Zeros of an output over a source, rad/s; those that cancel against poles of the circuit are among them.
 * @returns undefined where the source does not reach the output at all
 * @throws Fault where the circuit cannot be solved
 */
export function zerosOf(circuit: Circuit, input: string, output: Output): Complex[] | undefined {
  ensureSolvable(circuit, input, [output])
  const form = branchForm(circuit)
  const equations = equationsOf(circuit, { ...form, branched: e => form.branched(e) || (output.type === 'current' && output.element === e.ref) })
  const n = equations.unknowns.length
  const pencil = unscaled(equations, n + 1)
  for (const { row, value } of excitation(circuit, equations, input)) pencil.g[row]![n]! -= value
  const look = (unknown: number | undefined, sign: number) => {
    if (unknown !== undefined && unknown >= 0) pencil.g[n]![unknown]! += sign
  }
  if (output.type === 'current') look(equations.branch(output.element), 1)
  else output.nodes.forEach((node, k) => look(equations.node(node), k === 0 ? 1 : -1))
  const units = unitsOf(circuit)
  return rootsOfPencil(scaled(pencil, equations, units), units.rate)
}
