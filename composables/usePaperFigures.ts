import { responseRequests, sheetLines } from '#shared/document/lines'
import type { SheetDocument } from '#shared/document/types'
import type { SheetCaution } from '#shared/engine'
import type { EngineSettings, ResponseFigures, StepFigures } from '#shared/engine/types'
import type { SheetEngineClient } from './useEngine'

const CURVE_POINTS = 400
const STEP_POINTS = 400
/** Nobody is typing, so the engine may take its time, ms. */
const PATIENCE = 30_000

export interface BlockFigures { response: ResponseFigures | null, step: StepFigures | null, failed: string | null }

/** Formulas that stand inside prose, each once. */
function proseFormulas(node: unknown, found = new Set<string>()): Set<string> {
  if (typeof node !== 'object' || node === null) return found
  const { type, attrs, content } = node as { type?: string, attrs?: { source?: unknown }, content?: unknown[] }
  if (type === 'inlineMath' && typeof attrs?.source === 'string') found.add(attrs.source)
  for (const child of Array.isArray(content) ? content : []) proseFormulas(child, found)
  return found
}

/**
 * What a frozen sheet shows beyond its recorded results: curves, step responses, formulas in prose, cautions.
 * Computed on this device, in the engine's worker, from the same lines; `ready` when all of it is there.
 */
export function usePaperFigures(document: () => SheetDocument, settings: () => EngineSettings) {
  const figures = shallowRef<Readonly<Record<string, BlockFigures>>>({})
  const maths = shallowRef<Readonly<Record<string, string>>>({})
  const cautions = shallowRef<readonly SheetCaution[]>([])
  const ready = ref(false)
  let engine: SheetEngineClient | null = null

  async function drawBlock(client: SheetEngineClient, { blockId, request, step }: ReturnType<typeof responseRequests>[number]) {
    const drawn: BlockFigures = { response: null, step: null, failed: null }
    try {
      drawn.response = await client.response(blockId, { ...request, points: CURVE_POINTS })
      drawn.step = step && await client.step(blockId, { ...step, points: STEP_POINTS })
    }
    catch (error) {
      drawn.failed = error instanceof Error ? error.message : 'This response could not be computed.'
    }
    figures.value = { ...figures.value, [blockId]: drawn }
  }

  async function typeset(client: SheetEngineClient) {
    const known: Record<string, string> = {}
    for (const source of proseFormulas(document())) {
      const latex = await client.typeset(source)
      if (latex !== null) known[source] = latex
    }
    maths.value = known
  }

  async function warn(client: SheetEngineClient) {
    const blocks = responseRequests(document()).map(({ blockId, request, supply, rating }) => ({ blockId, transfer: request.transfer, supply, rating }))
    cautions.value = await client.cautions(blocks).catch(() => null) ?? []
  }

  async function draw() {
    ready.value = false
    const client = engine
    if (!client) return
    client.evaluate({ lines: sheetLines(document()), settings: settings() })
    await Promise.all([typeset(client), warn(client), ...responseRequests(document()).map(one => drawBlock(client, one))])
    ready.value = true
  }

  onMounted(() => {
    engine = useEngine(() => {}, { patience: PATIENCE })
    void draw()
  })
  watch(document, () => { void draw() })
  onBeforeUnmount(() => engine?.destroy())

  return { figures: shallowReadonly(figures), maths: shallowReadonly(maths), cautions: shallowReadonly(cautions), ready: readonly(ready) }
}
