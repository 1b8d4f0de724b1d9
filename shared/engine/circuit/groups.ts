/** Which nodes hang together through elements. */
import type { Circuit, Element } from './types'
import { nodesOf } from './types'

export interface Groups {
  joined(a: string, b: string): boolean
  members(node: string): readonly string[]
}

/** Pairs of nodes that an element connects; a controlling port carries no current and connects nothing. */
export function links(e: Element): (readonly [string, string])[] {
  switch (e.kind) {
    case 'coupling': return []
    case 'opamp': return [[e.nodes[2], '0']]
    case 'transformer': return [[e.nodes[0], e.nodes[1]], [e.nodes[2], e.nodes[3]]]
    default: return [e.nodes]
  }
}

/** @param through which elements count */
export function groupsOf(circuit: Circuit, through: (e: Element) => boolean): Groups {
  const leader = new Map<string, string>()
  const find = (node: string): string => {
    let at = node
    for (let up = leader.get(at); up !== undefined && up !== at; up = leader.get(at)) at = up
    return at
  }
  for (const e of circuit.elements) for (const node of nodesOf(e)) if (!leader.has(node)) leader.set(node, node)
  for (const e of circuit.elements.filter(through)) for (const [a, b] of links(e)) leader.set(find(a), find(b))
  return {
    joined: (a, b) => find(a) === find(b),
    members: node => [...leader.keys()].filter(other => find(other) === find(node)),
  }
}
