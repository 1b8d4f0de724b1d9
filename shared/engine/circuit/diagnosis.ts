/** Why a circuit cannot be solved, in the names of its elements. */
import type { Fault } from '../fault'
import { fault } from '../fault'
import { groupsOf, links } from './groups'
import type { Equations } from './stamp'
import type { Circuit, Element, Output } from './types'
import { nodesOf } from './types'

/** "R1", "R1 and R2", "R1, R2 and R3"; the rest of a long list is counted. */
export function listed(names: readonly string[]): string {
  const shown = names.length > 8 ? [...names.slice(0, 7), `${names.length - 7} more`] : names
  return shown.length < 2 ? shown.join('') : `${shown.slice(0, -1).join(', ')} and ${shown[shown.length - 1]}`
}

const plural = (word: string, names: readonly string[]) => names.length === 1 ? word : `${word}s`

const VALUE_NOUN: Partial<Record<Element['kind'], string>> = { R: 'resistance', L: 'inductance', C: 'capacitance' }

function checkValue(e: Element): void {
  if (e.kind === 'opamp') {
    if (e.bandwidth !== undefined && !(e.bandwidth > 0 && e.bandwidth < Infinity)) throw fault('circuit-value', `The gain–bandwidth product of ${e.ref} must be a frequency above zero.`)
    if (e.gain !== undefined && !(e.gain > 0 && e.gain < Infinity)) throw fault('circuit-value', `The gain of ${e.ref} must be a number above zero.`)
    return
  }
  if (!Number.isFinite(e.value)) throw fault('circuit-value', `${e.ref} has no value.`, 'Give it a number with its unit.')
  if (e.kind === 'coupling' && Math.abs(e.value) > 1) throw fault('circuit-value', `The coupling factor of ${e.ref} is ${e.value}; it lies between −1 and 1.`)
  const noun = VALUE_NOUN[e.kind]
  if (noun !== undefined && e.value === 0) throw fault('circuit-value', `The ${noun} of ${e.ref} is zero.`, e.kind === 'C' ? 'Leave it out.' : 'Join its nodes instead.')
  if ((e.kind === 'L' || e.kind === 'C') && e.value < 0) throw fault('circuit-value', `The ${noun} of ${e.ref} is negative.`)
  const series = e.kind === 'C' ? [e.seriesR, e.seriesL] : e.kind === 'L' ? [e.seriesR] : []
  if (series.some(x => x !== undefined && !(x >= 0 && x < Infinity))) throw fault('circuit-value', `What stands in series in ${e.ref} must not be negative.`)
}

function checkReferences(e: Element, named: ReadonlyMap<string, Element>): void {
  if (e.kind === 'coupling') {
    for (const ref of e.couples) {
      if (named.get(ref)?.kind !== 'L') throw fault('circuit-reference', `${e.ref} couples ${ref}, which is no inductor of this circuit.`)
    }
    if (e.couples[0] === e.couples[1]) throw fault('circuit-reference', `${e.ref} couples ${e.couples[0]} with itself.`)
  }
  if (e.kind === 'cccs' || e.kind === 'ccvs') {
    const control = named.get(e.controlledBy)
    if (control?.kind !== 'V' && control?.kind !== 'L') throw fault('circuit-reference', `${e.ref} is controlled by the current of ${e.controlledBy}, which is no voltage source or inductor of this circuit.`)
  }
}

function checkElements(circuit: Circuit): ReadonlyMap<string, Element> {
  if (circuit.elements.length === 0) throw fault('circuit-empty', 'The circuit has no elements.')
  const named = new Map<string, Element>()
  for (const e of circuit.elements) {
    if (named.has(e.ref)) throw fault('circuit-reference', `Two elements are called ${e.ref}.`, 'Give each its own designator.')
    named.set(e.ref, e)
    checkValue(e)
  }
  for (const e of circuit.elements) checkReferences(e, named)
  return named
}

function checkTerminals(circuit: Circuit, named: ReadonlyMap<string, Element>, input: string | undefined, outputs: readonly Output[]): void {
  if (input !== undefined) {
    const source = named.get(input)
    if (!source) throw fault('circuit-input', `There is no source ${input} in this circuit.`)
    if (source.kind !== 'V' && source.kind !== 'I') throw fault('circuit-input', `${input} is no independent source.`)
  }
  const nodes = new Set(circuit.elements.flatMap(nodesOf))
  for (const output of outputs) {
    if (output.type === 'current') {
      const element = named.get(output.element)
      if (!element || element.kind === 'coupling') throw fault('circuit-output', `There is no element ${output.element} whose current could be looked at.`)
      continue
    }
    const missing = output.nodes.find(n => n !== '0' && !nodes.has(n))
    if (missing !== undefined) throw fault('circuit-output', `There is no node ${missing} in this circuit.`)
  }
}

function checkGround(circuit: Circuit): void {
  if (circuit.elements.some(e => nodesOf(e).includes('0'))) return
  throw fault('circuit-no-ground', 'No element is connected to the reference node 0.', 'Call the common node of the circuit 0.')
}

/** Parts of the circuit that nothing connects to the reference node. */
function checkFloating(circuit: Circuit): void {
  const groups = groupsOf(circuit, () => true)
  const floating = [...new Set(circuit.elements.flatMap(nodesOf))].filter(n => !groups.joined(n, '0'))
  if (floating.length === 0) return
  const part = floating.filter(n => groups.joined(n, floating[0]!))
  const touching = circuit.elements.filter(e => nodesOf(e).some(n => part.includes(n))).map(e => e.ref)
  throw fault('circuit-floating', `Nothing connects ${plural('node', part)} ${listed(part)} (${listed(touching)}) to the reference node 0.`,
    'Connect one of them to node 0, directly or through a large resistor.')
}

/** Independent sources alone decide these: no values of other elements can mend them. */
function checkSources(circuit: Circuit): void {
  const loop = voltageLoop(circuit, e => e.kind === 'V')
  if (loop) throw fault('circuit-voltage-loop', `The voltage sources ${listed(loop)} form a loop; their voltages contradict each other.`, 'Put a resistance in series with one of them.')
  const cut = currentCut(circuit, e => e.kind === 'I')
  if (cut) throw cutFault(cut)
}

function cutFault(cut: { nodes: string[], elements: string[] }): Fault {
  return fault('circuit-current-cut', `Only the current ${plural('source', cut.elements)} ${listed(cut.elements)} ${cut.elements.length === 1 ? 'leads' : 'lead'} to ${plural('node', cut.nodes)} ${listed(cut.nodes)}; there is no other way for the current.`,
    'Put a resistance in parallel with one of them.')
}

/** The first loop that consists only of such elements. */
function voltageLoop(circuit: Circuit, belongs: (e: Element) => boolean): string[] | undefined {
  const edges: { ref: string, a: string, b: string }[] = []
  for (const e of circuit.elements.filter(belongs)) {
    for (const [a, b] of links(e)) {
      if (a === b) return [e.ref]
      const way = pathOf(edges, a, b)
      if (way) return [...new Set([...way, e.ref])]
      edges.push({ ref: e.ref, a, b })
    }
  }
  return undefined
}

/** Designators along the way from one node to another through a forest of edges. */
function pathOf(edges: readonly { ref: string, a: string, b: string }[], from: string, to: string): string[] | undefined {
  const cameBy = new Map<string, { ref: string, before: string } | undefined>([[from, undefined]])
  const queue = [from]
  for (let node = queue.shift(); node !== undefined && !cameBy.has(to); node = queue.shift()) {
    for (const edge of edges) {
      const next = edge.a === node ? edge.b : edge.b === node ? edge.a : undefined
      if (next === undefined || cameBy.has(next)) continue
      cameBy.set(next, { ref: edge.ref, before: node })
      queue.push(next)
    }
  }
  if (!cameBy.has(to)) return undefined
  const way: string[] = []
  for (let step = cameBy.get(to); step; step = cameBy.get(step.before)) way.unshift(step.ref)
  return way
}

/** Nodes that are joined to the rest only by such elements, and those elements. */
function currentCut(circuit: Circuit, belongs: (e: Element) => boolean): { nodes: string[], elements: string[] } | undefined {
  const groups = groupsOf(circuit, e => !belongs(e))
  for (const node of new Set(circuit.elements.flatMap(nodesOf))) {
    if (groups.joined(node, '0')) continue
    const nodes = [...groups.members(node)]
    const elements = circuit.elements.filter(e => belongs(e) && links(e).some(([a, b]) => nodes.includes(a) !== nodes.includes(b))).map(e => e.ref)
    if (elements.length > 0) return { nodes, elements }
  }
  return undefined
}

/** @throws Fault with what is wrong in words, for everything that can be seen without solving */
export function ensureSolvable(circuit: Circuit, input: string | undefined, outputs: readonly Output[]): void {
  const named = checkElements(circuit)
  checkGround(circuit)
  checkTerminals(circuit, named, input, outputs)
  checkFloating(circuit)
  checkSources(circuit)
}

const HOLDS_VOLTAGE: readonly Element['kind'][] = ['V', 'vcvs', 'ccvs', 'transformer', 'opamp']
const DRIVES_CURRENT: readonly Element['kind'][] = ['I', 'vccs', 'cccs']

/** The fault of equations that have no single solution. */
export function singular(circuit: Circuit, equations: Equations, without: readonly number[]): Fault {
  const loop = voltageLoop(circuit, e => HOLDS_VOLTAGE.includes(e.kind))
  if (loop) return fault('circuit-voltage-loop', `${listed(loop)} form a loop in which each holds a voltage; their voltages contradict each other.`, 'Put a resistance in series with one of them.')
  const cut = currentCut(circuit, e => DRIVES_CURRENT.includes(e.kind))
  if (cut) return cutFault(cut)
  const names = without.map(k => equations.unknowns[k]!).map(u => u.kind === 'voltage' ? `the voltage of node ${u.name}` : `the current of ${u.name}`)
  const amplifiers = circuit.elements.filter(e => e.kind === 'opamp').map(e => e.ref)
  const unknown = `The equations of this circuit leave ${names.length > 0 ? listed(names) : 'a voltage or current'} undetermined`
  if (amplifiers.length > 0) return fault('circuit-singular', `${unknown}.`, `Look for the feedback of ${listed(amplifiers)}: an ideal operational amplifier needs a way from its output to its inputs.`)
  const controlled = circuit.elements.filter(e => ['vcvs', 'vccs', 'ccvs', 'cccs', 'transformer'].includes(e.kind)).map(e => e.ref)
  if (controlled.length > 0) return fault('circuit-singular', `${unknown}.`, `Look at what controls ${listed(controlled)}.`)
  const tight = circuit.elements.filter(e => e.kind === 'coupling' && Math.abs(e.value) === 1).map(e => e.ref)
  return fault('circuit-singular', `${unknown}.`, tight.length > 0 ? `The coupling ${listed(tight)} is 1.` : 'Look for elements that cancel each other.')
}
