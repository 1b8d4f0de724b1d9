/** A sheet computed as a whole: what is shown, what is recorded, what is cautioned. Runs in the engine's process; pure but for nothing. */
import { createSheetEngine, ENGINE_VERSION, recordedResults, sheetCautions } from '../../shared/engine'
import { canonicalText } from '../../shared/document/canonical'
import { responseRequests, sheetLines } from '../../shared/document/lines'
import { rowHashes, type RowHash } from '../../shared/document/lineHashes'
import type { SheetDocument } from '../../shared/document/types'
import type { EngineSettings, SheetResult } from '../../shared/engine/types'

export interface Caution { code: string, message: string, lineId: string | null }

export interface Computed {
  results: SheetResult
  /** Canonical text of the recorded results. */
  recordedJson: string
  cautions: Caution[]
  /** What keeps a response block from being drawn, by block. */
  responseProblems: { blockId: string, message: string }[]
  rows: RowHash[]
  engineVersion: string
}

/** Enough points to find what is wrong; the curve itself is drawn elsewhere. */
const PROBE_POINTS = 16

export function compute(document: SheetDocument, settings: EngineSettings): Computed {
  const engine = createSheetEngine(settings)
  const results = engine.evaluate({ lines: sheetLines(document), settings })
  const responses = responseRequests(document)
  const responseProblems = responses.flatMap(({ blockId, request, step }) => [
    ...engine.response({ ...request, points: PROBE_POINTS }).problems,
    ...(step ? engine.step({ ...step, points: PROBE_POINTS }).problems : []),
  ].filter(problem => problem.severity === 'error').map(problem => ({ blockId, message: problem.message })))
  const cautions = sheetCautions(engine, results, responses.map(one => ({ blockId: one.blockId, transfer: one.request.transfer, supply: one.supply, rating: one.rating })))
  return {
    results,
    recordedJson: canonicalText(recordedResults(results)),
    cautions: cautions.map(({ code, message, lineId, blockId }) => ({ code, message, lineId: lineId ?? blockId ?? null })),
    responseProblems,
    rows: rowHashes(document, results),
    engineVersion: ENGINE_VERSION,
  }
}
