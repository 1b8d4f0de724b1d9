/**
 * The calculation engine of one sheet, in a worker of its own: results follow the typing, and what takes too
 * long never holds up the page.
 */
import type { EngineQueue } from './useEngineQueue'
import { createEngineQueue } from './useEngineQueue'
import type { EngineReply } from '~/workers/messages'
import type { CautionBlock, SheetCaution } from '#shared/engine'
import type { LineResult, ResponseFigures, ResponseRequest, SheetInput, StepFigures, StepRequest } from '#shared/engine/types'

export interface SheetEngineClient {
  evaluate: (input: SheetInput) => void
  /** Null where a newer request with the same key took its place. */
  response: (key: string, request: ResponseRequest) => Promise<ResponseFigures | null>
  step: (key: string, request: StepRequest) => Promise<StepFigures | null>
  typeset: (source: string) => Promise<string | null>
  /** What is wrong with an expression in the scope of the whole sheet, in words, or null. */
  problemOf: (key: string, source: string) => Promise<string | null>
  cautions: (blocks: CautionBlock[]) => Promise<SheetCaution[] | null>
  /** Counts the evaluations whose results differ, so that plots know when to ask again. */
  round: Readonly<Ref<number>>
  destroy: () => void
}

function spawnWorker(reply: (reply: EngineReply) => void, failed: (message: string) => void) {
  const worker = new Worker(new URL('../workers/engine.worker.ts', import.meta.url), { type: 'module', name: 'engine' })
  worker.onmessage = (event: MessageEvent<EngineReply>) => reply(event.data)
  worker.onerror = (event) => {
    event.preventDefault()
    failed('The calculation engine could not be loaded. Reload the page.')
  }
  return { post: (question: unknown) => worker.postMessage(question), terminate: () => worker.terminate() }
}

/** `patience` is the longest time of one answer, ms; a sheet that nobody is typing in may take longer. */
export function useEngine(onResults: (results: LineResult[]) => void, { patience }: { patience?: number } = {}): SheetEngineClient {
  const round = ref(0)
  let names = ''
  const typesetMemory = new Map<string, Promise<string | null>>()
  const queue: EngineQueue = createEngineQueue({
    spawn: spawnWorker,
    patience,
    onResults: (results) => {
      const now = results.map(result => result.defines ?? '').join(' ')
      // Whether a word is a name or a unit depends on what the sheet defines.
      if (now !== names) typesetMemory.clear()
      names = now
      onResults(results)
      round.value += 1
    },
  })

  return {
    evaluate: queue.evaluate,
    response: (key, request) => queue.ask(`response ${key}`, 'response', request),
    step: (key, request) => queue.ask(`step ${key}`, 'step', request),
    typeset(source) {
      const known = typesetMemory.get(source)
      if (known) return known
      if (typesetMemory.size > 500) typesetMemory.clear()
      const asked = queue.ask(`typeset ${source}`, 'typeset', source).catch(() => null)
      typesetMemory.set(source, asked)
      return asked
    },
    problemOf: (key, source) => queue.ask(`expression ${key}`, 'expression', source).catch(() => null),
    cautions: blocks => queue.ask('cautions', 'cautions', blocks),
    round: readonly(round),
    destroy: queue.destroy,
  }
}
