/** A linear circuit as data. Values are in SI units; node `0` is the reference. */

export type Port = readonly [string, string]

interface Named { readonly ref: string }
interface TwoTerminal extends Named { readonly nodes: Port }

export interface Resistor extends TwoTerminal { readonly kind: 'R', /** Ω, not zero */ readonly value: number }
/** An inductor, H, with the resistance of its winding in series, Ω. */
export interface Inductor extends TwoTerminal { readonly kind: 'L', readonly value: number, readonly seriesR?: number }
/** A capacitor, F, with its series resistance, Ω, and series inductance, H. */
export interface Capacitor extends TwoTerminal { readonly kind: 'C', readonly value: number, readonly seriesR?: number, readonly seriesL?: number }
/** Holds the first node at `value` volts above the second. */
export interface VoltageSource extends TwoTerminal { readonly kind: 'V', readonly value: number }
/** Drives `value` amperes from its first node through itself to the second. */
export interface CurrentSource extends TwoTerminal { readonly kind: 'I', readonly value: number }
/** Two inductors of coupling factor `value`, dots at their first nodes. */
export interface Coupling extends Named { readonly kind: 'coupling', readonly couples: Port, readonly value: number }
/** Voltage of the port = value × voltage of the controlling port. */
export interface VoltageByVoltage extends TwoTerminal { readonly kind: 'vcvs', readonly control: Port, readonly value: number }
/** Current from the first node through itself to the second = value (S) × voltage of the controlling port. */
export interface CurrentByVoltage extends TwoTerminal { readonly kind: 'vccs', readonly control: Port, readonly value: number }
/** The same = value × current of the controlling element. */
export interface CurrentByCurrent extends TwoTerminal { readonly kind: 'cccs', readonly controlledBy: string, readonly value: number }
/** Voltage of the port = value (Ω) × current of the controlling element. */
export interface VoltageByCurrent extends TwoTerminal { readonly kind: 'ccvs', readonly controlledBy: string, readonly value: number }
/** Ideal transformer: voltage of the first pair of nodes = value × voltage of the second pair. */
export interface Transformer extends Named { readonly kind: 'transformer', readonly nodes: readonly [string, string, string, string], readonly value: number }
/**
 * Operational amplifier: non-inverting input, inverting input, output. Ideal without `bandwidth`; with it one pole:
 * output = A/(1 + s·A/(2π·bandwidth)) × input voltage, `bandwidth` in Hz being the product of gain and bandwidth
 * and A = `gain` the gain at zero frequency (unbounded where absent).
 */
export interface Amplifier extends Named { readonly kind: 'opamp', readonly nodes: readonly [string, string, string], readonly bandwidth?: number, readonly gain?: number }

export type Element = Resistor | Inductor | Capacitor | VoltageSource | CurrentSource | Coupling
  | VoltageByVoltage | CurrentByVoltage | CurrentByCurrent | VoltageByCurrent | Transformer | Amplifier

export type Kind = Element['kind']

export interface Circuit { readonly elements: readonly Element[] }

/** What is looked at: a voltage between two nodes, or the current of an element from its first node to its second. */
export type Output = { readonly type: 'voltage', readonly nodes: Port } | { readonly type: 'current', readonly element: string }

/** The nodes an element stands between, its controlling nodes included. */
export function nodesOf(element: Element): readonly string[] {
  if (element.kind === 'coupling') return []
  if (element.kind === 'vcvs' || element.kind === 'vccs') return [...element.nodes, ...element.control]
  return element.nodes
}
