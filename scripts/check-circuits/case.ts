/** The case files of `npm run check:circuits`: read, and refused with words where they are malformed. */
import { readFileSync } from 'node:fs'
import { z } from 'zod'
import type { Element } from '../../shared/engine/circuit'

const node = z.union([z.string().min(1), z.int().nonnegative()]).transform(String)
const port = z.tuple([node, node])
const named = { ref: z.string().min(1) }
const two = { ...named, nodes: port, value: z.number() }
const series = z.number().nonnegative().optional()

const element = z.discriminatedUnion('kind', [
  z.strictObject({ ...two, kind: z.literal('R') }),
  z.strictObject({ ...two, kind: z.literal('L'), series_R: series }),
  z.strictObject({ ...two, kind: z.literal('C'), series_R: series, series_L: series }),
  z.strictObject({ ...two, kind: z.literal('V') }),
  z.strictObject({ ...two, kind: z.literal('I') }),
  z.strictObject({ ...named, kind: z.literal('coupling'), couples: z.tuple([z.string(), z.string()]), value: z.number() }),
  z.strictObject({ ...two, kind: z.literal('vcvs'), ctrl_nodes: port }),
  z.strictObject({ ...two, kind: z.literal('vccs'), ctrl_nodes: port }),
  z.strictObject({ ...two, kind: z.literal('cccs'), ctrl_ref: z.string() }),
  z.strictObject({ ...two, kind: z.literal('ccvs'), ctrl_ref: z.string() }),
  z.strictObject({ ...named, kind: z.literal('transformer'), nodes: z.tuple([node, node, node, node]), value: z.number() }),
  z.strictObject({ ...named, kind: z.literal('opamp'), nodes: z.tuple([node, node, node]), gain: z.number().positive().optional(), bandwidth_Hz: z.number().positive().optional() }),
])

const output = z.discriminatedUnion('type', [
  z.object({ type: z.literal('voltage'), nodes: port }),
  z.object({ type: z.literal('current'), element: z.string() }),
])

export const caseSchema = z.object({
  name: z.string(),
  elements: z.array(element).min(1),
  input: z.string(),
  output,
  freqs_Hz: z.array(z.number().nonnegative()).min(1, 'a case has frequencies'),
  H_re: z.array(z.number()),
  H_im: z.array(z.number()),
  poles_rad_s: z.array(z.tuple([z.number(), z.number()])).optional(),
  tolerance: z.object({ H: z.number().positive().default(1e-8), poles: z.number().positive().default(1e-7) }).default({ H: 1e-8, poles: 1e-7 }),
}).refine(c => c.H_re.length === c.freqs_Hz.length && c.H_im.length === c.freqs_Hz.length, 'freqs_Hz, H_re and H_im are of different lengths')

export type CircuitCase = z.infer<typeof caseSchema>

/** The element as the engine takes it. */
export function elementOf(e: CircuitCase['elements'][number]): Element {
  switch (e.kind) {
    case 'L': return { ref: e.ref, kind: 'L', nodes: e.nodes, value: e.value, ...(e.series_R === undefined ? {} : { seriesR: e.series_R }) }
    case 'C': return { ref: e.ref, kind: 'C', nodes: e.nodes, value: e.value, ...(e.series_R === undefined ? {} : { seriesR: e.series_R }), ...(e.series_L === undefined ? {} : { seriesL: e.series_L }) }
    case 'vcvs':
    case 'vccs': return { ref: e.ref, kind: e.kind, nodes: e.nodes, value: e.value, control: e.ctrl_nodes }
    case 'cccs':
    case 'ccvs': return { ref: e.ref, kind: e.kind, nodes: e.nodes, value: e.value, controlledBy: e.ctrl_ref }
    case 'opamp': return { ref: e.ref, kind: 'opamp', nodes: e.nodes, ...(e.gain === undefined ? {} : { gain: e.gain }), ...(e.bandwidth_Hz === undefined ? {} : { bandwidth: e.bandwidth_Hz }) }
    default: return e
  }
}

/** A case, or what is wrong with its file. */
export function readCase(file: string): CircuitCase | { malformed: string } {
  let data: unknown
  try {
    data = JSON.parse(readFileSync(file, 'utf8'))
  }
  catch (error) {
    return { malformed: `it is not JSON: ${error instanceof Error ? error.message : String(error)}` }
  }
  const parsed = caseSchema.safeParse(data)
  if (parsed.success) return parsed.data
  return { malformed: parsed.error.issues.map(issue => `${issue.path.join('.') || 'the file'}: ${issue.message}`).join('; ') }
}
