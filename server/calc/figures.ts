/** What an issued sheet draws beyond its recorded results: curves and step responses by block, formulas in prose. Runs in the engine's process. */
import { createSheetEngine } from '../../shared/engine'
import { responseRequests, sheetLines } from '../../shared/document/lines'
import type { SheetDocument } from '../../shared/document/types'
import type { EngineSettings } from '../../shared/engine/types'
import type { PrintView } from '../../shared/types/print'

const CURVE_POINTS = 400
const STEP_POINTS = 400

export type SheetFigures = Pick<PrintView, 'figures' | 'maths'>

/** Formulas that stand inside prose, each once. */
function proseFormulas(node: unknown, found = new Set<string>()): Set<string> {
  if (typeof node !== 'object' || node === null) return found
  const { type, attrs, content } = node as { type?: string, attrs?: { source?: unknown }, content?: unknown[] }
  if (type === 'inlineMath' && typeof attrs?.source === 'string') found.add(attrs.source)
  for (const child of Array.isArray(content) ? content : []) proseFormulas(child, found)
  return found
}

export function computeFigures(document: SheetDocument, settings: EngineSettings): SheetFigures {
  const engine = createSheetEngine(settings)
  engine.evaluate({ lines: sheetLines(document), settings })
  const figures = responseRequests(document).map(({ blockId, request, step }) => [blockId, {
    response: engine.response({ ...request, points: CURVE_POINTS }),
    step: step && engine.step({ ...step, points: STEP_POINTS }),
    failed: null,
  }] as const)
  const maths = [...proseFormulas(document)].flatMap((source) => {
    const typeset = engine.typesetExpression(source)
    return 'latex' in typeset ? [[source, typeset.latex] as const] : []
  })
  return { figures: Object.fromEntries(figures), maths: Object.fromEntries(maths) }
}
