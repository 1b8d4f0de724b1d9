/** Chooses which elements stand in the equations by their admittance and which by their current. */
import { boundInductors } from './stamp'
import type { Form } from './stamp'
import type { Circuit, Element } from './types'

/**
 * An admittance this many times larger than the smallest beside it would leave that one with fewer than eleven
 * digits in their sum. The larger one then stands by its current, so that nothing is added to it.
 */
const DOMINANT = 1e5

/** Everything by its current: the form for poles, where no digit may be lost in sums of conductances. */
export function branchForm(circuit: Circuit): Form {
  const all = circuit.elements.length <= 80
  return { branched: e => all && e.kind === 'R', inverse: () => false }
}

interface Weak { owner: string, size: number, next: number }

function admittanceAt(e: Element, omega: number): number {
  switch (e.kind) {
    case 'R': return Math.abs(1 / e.value)
    case 'L': return 1 / (Math.abs(omega * e.value) + Math.abs(e.seriesR ?? 0))
    case 'C': return Math.abs(omega * e.value)
    case 'vccs': return Math.abs(e.value)
    default: return 0
  }
}

/** The smallest admittance at each node and whose it is, and the next larger one. */
function weakest(circuit: Circuit, omega: number): Map<string, Weak> {
  const at = new Map<string, Weak>()
  for (const e of circuit.elements) {
    const size = admittanceAt(e, omega)
    if (size === 0 || e.kind === 'coupling') continue
    for (const node of e.nodes) {
      const weak = at.get(node)
      if (!weak) at.set(node, { owner: e.ref, size, next: Infinity })
      else if (size < weak.size) at.set(node, { owner: e.ref, size, next: weak.size })
      else weak.next = Math.min(weak.next, size)
    }
  }
  return at
}

function dominates(e: Element, omega: number, at: ReadonlyMap<string, Weak>): boolean {
  if (e.kind === 'coupling') return false
  const size = admittanceAt(e, omega)
  return e.nodes.some((node) => {
    const weak = node === '0' ? undefined : at.get(node)
    if (!weak) return false
    return size > DOMINANT * (weak.owner === e.ref ? weak.next : weak.size)
  })
}

/**
 * The smallest equations that keep their digits from `low` to `high` rad/s, both above zero.
 * @param looked elements whose current is asked for
 */
export function sweepForm(circuit: Circuit, low: number, high: number, looked: ReadonlySet<string>): Form {
  const bound = boundInductors(circuit)
  const heavy = new Set<string>(looked)
  for (const omega of [low, high]) {
    const at = weakest(circuit, omega)
    for (const e of circuit.elements) if (dominates(e, omega, at)) heavy.add(e.ref)
  }
  return {
    branched: e => heavy.has(e.ref) || (e.kind === 'C' && (e.seriesR ?? 0) !== 0),
    inverse: e => !heavy.has(e.ref) && !bound.has(e.ref) && (e.seriesR ?? 0) === 0,
  }
}
