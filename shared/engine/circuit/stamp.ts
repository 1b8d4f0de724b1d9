/** What each kind of element puts into the equations. */
import { TWO_PI } from '../numeric/math'
import { Assembly } from './assembly'
import type { Entry, Unknown } from './assembly'
import type { Capacitor, Circuit, Element, Inductor, Kind, Resistor } from './types'

/** How elements that have an admittance are written down: by it, or with their current as an unknown. */
export interface Form {
  /** Whether the element is to have its current among the unknowns. */
  branched(element: Element): boolean
  /** Whether an inductor may stand as the admittance 1/(sL); never so in a linear pencil. */
  inverse(element: Inductor): boolean
}

/** Σ (g + s·c + l/s) x = sources. */
export interface Equations {
  readonly unknowns: readonly Unknown[]
  readonly entries: readonly Entry[]
  node(name: string): number | undefined
  branch(ref: string): number | undefined
}

type Stamp<K extends Kind> = (a: Assembly, element: Extract<Element, { kind: K }>, form: Form) => void

function resistor(a: Assembly, ref: string, p: number, n: number, value: number, branched: boolean): void {
  if (!branched) {
    a.admittance(p, n, 1 / value)
    return
  }
  const i = a.branch(ref)
  a.flow(i, p, n)
  a.across(i, p, n)
  a.add(i, i, -value)
}

function inductor(a: Assembly, ref: string, p: number, n: number, value: number, series: number): void {
  const i = a.branch(ref)
  a.flow(i, p, n)
  a.across(i, p, n)
  a.add(i, i, -series, -value)
}

function capacitor(a: Assembly, element: Capacitor, form: Form): void {
  const [first, second] = element.nodes
  const n = a.node(second)
  let p = a.node(first)
  const series = element.seriesR ?? 0
  const inductance = element.seriesL ?? 0
  if (series !== 0 || inductance !== 0) {
    const inner = a.node(innerNode(element.ref))
    if (inductance !== 0) inductor(a, element.ref, p, inner, inductance, series)
    else resistor(a, element.ref, p, inner, series, form.branched(element))
    p = inner
  }
  else if (form.branched(element)) {
    const i = a.branch(element.ref)
    a.flow(i, p, n)
    a.add(i, p, 0, element.value)
    a.add(i, n, 0, -element.value)
    a.add(i, i, -1)
    return
  }
  a.admittance(p, n, 0, element.value)
}

/** Between a capacitor and what stands in series with it. No node of a user's can be called so. */
export function innerNode(ref: string): string {
  return `${ref} (inner)`
}

const STAMPS: { readonly [K in Kind]: Stamp<K> } = {
  R: (a, e: Resistor, form) => resistor(a, e.ref, a.node(e.nodes[0]), a.node(e.nodes[1]), e.value, form.branched(e)),
  L: (a, e, form) => {
    const p = a.node(e.nodes[0])
    const n = a.node(e.nodes[1])
    if (form.inverse(e)) a.admittance(p, n, 0, 0, 1 / e.value)
    else inductor(a, e.ref, p, n, e.value, e.seriesR ?? 0)
  },
  C: capacitor,
  V: (a, e) => {
    const i = a.branch(e.ref)
    a.flow(i, a.node(e.nodes[0]), a.node(e.nodes[1]))
    a.across(i, a.node(e.nodes[0]), a.node(e.nodes[1]))
  },
  I: (a, e, form) => {
    const p = a.node(e.nodes[0])
    const n = a.node(e.nodes[1])
    if (!form.branched(e)) return
    a.flow(a.branch(e.ref), p, n)
    a.add(a.branch(e.ref), a.branch(e.ref), 1)
  },
  coupling: () => undefined,
  vcvs: (a, e) => {
    const i = a.branch(e.ref)
    a.flow(i, a.node(e.nodes[0]), a.node(e.nodes[1]))
    a.across(i, a.node(e.nodes[0]), a.node(e.nodes[1]))
    a.across(i, a.node(e.control[0]), a.node(e.control[1]), -e.value)
  },
  vccs: (a, e, form) => {
    const p = a.node(e.nodes[0])
    const n = a.node(e.nodes[1])
    if (form.branched(e)) {
      const i = a.branch(e.ref)
      a.flow(i, p, n)
      a.add(i, i, 1)
      a.across(i, a.node(e.control[0]), a.node(e.control[1]), -e.value)
      return
    }
    a.across(p, a.node(e.control[0]), a.node(e.control[1]), e.value)
    a.across(n, a.node(e.control[0]), a.node(e.control[1]), -e.value)
  },
  cccs: (a, e, form) => {
    const p = a.node(e.nodes[0])
    const n = a.node(e.nodes[1])
    const control = a.branch(e.controlledBy)
    if (!form.branched(e)) {
      a.flow(control, p, n, e.value)
      return
    }
    const i = a.branch(e.ref)
    a.flow(i, p, n)
    a.add(i, i, 1)
    a.add(i, control, -e.value)
  },
  ccvs: (a, e) => {
    const i = a.branch(e.ref)
    a.flow(i, a.node(e.nodes[0]), a.node(e.nodes[1]))
    a.across(i, a.node(e.nodes[0]), a.node(e.nodes[1]))
    a.add(i, a.branch(e.controlledBy), -e.value)
  },
  transformer: (a, e) => {
    const i = a.branch(e.ref)
    const [p, n, q, m] = e.nodes
    a.flow(i, a.node(p), a.node(n))
    a.flow(i, a.node(q), a.node(m), -e.value)
    a.across(i, a.node(p), a.node(n))
    a.across(i, a.node(q), a.node(m), -e.value)
  },
  opamp: (a, e) => {
    const i = a.branch(e.ref)
    const out = a.node(e.nodes[2])
    a.flow(i, out, a.node('0'))
    a.across(i, a.node(e.nodes[0]), a.node(e.nodes[1]))
    if (e.bandwidth !== undefined) a.add(i, out, e.gain === undefined ? 0 : -1 / e.gain, -1 / (TWO_PI * e.bandwidth))
    else if (e.gain !== undefined) a.add(i, out, -1 / e.gain)
  },
}

function stamp<K extends Kind>(a: Assembly, kind: K, element: Extract<Element, { kind: K }>, form: Form): void {
  STAMPS[kind](a, element, form)
}

/** Mutual inductance M = k·√(L₁L₂) between the currents of both inductors. */
function couple(a: Assembly, elements: readonly Element[]): void {
  for (const e of elements) {
    if (e.kind !== 'coupling') continue
    const [one, two] = e.couples.map(ref => elements.find(other => other.ref === ref))
    if (one?.kind !== 'L' || two?.kind !== 'L') continue
    const mutual = e.value * Math.sqrt(one.value) * Math.sqrt(two.value)
    a.add(a.branch(one.ref), a.branch(two.ref), 0, -mutual)
    a.add(a.branch(two.ref), a.branch(one.ref), 0, -mutual)
  }
}

/** Inductors whose current something else depends on. */
export function boundInductors(circuit: Circuit): ReadonlySet<string> {
  const bound = new Set<string>()
  for (const e of circuit.elements) {
    if (e.kind === 'coupling') e.couples.forEach(ref => bound.add(ref))
    if (e.kind === 'cccs' || e.kind === 'ccvs') bound.add(e.controlledBy)
  }
  return bound
}

export function equationsOf(circuit: Circuit, form: Form): Equations {
  const a = new Assembly()
  for (const e of circuit.elements) stamp(a, e.kind, e as never, form)
  couple(a, circuit.elements)
  return { unknowns: a.unknowns, entries: a.entries.filter(e => e.g !== 0 || e.c !== 0 || e.l !== 0), node: name => a.knownNode(name), branch: ref => a.knownBranch(ref) }
}

/** Right-hand side of a source of value 1: which equations it stands in. */
export function excitation(circuit: Circuit, equations: Equations, ref: string): { row: number, value: number }[] {
  const source = circuit.elements.find(e => e.ref === ref)
  if (source?.kind === 'V') return [{ row: equations.branch(ref)!, value: 1 }]
  if (source?.kind !== 'I') return []
  const branch = equations.branch(ref)
  if (branch !== undefined) return [{ row: branch, value: 1 }]
  return [{ row: equations.node(source.nodes[0])!, value: -1 }, { row: equations.node(source.nodes[1])!, value: 1 }].filter(e => e.row >= 0)
}
