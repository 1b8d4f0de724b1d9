/** The engine behind messages: nothing is decided here. The queue and the watch over time are in composables/useEngineQueue.ts. */
import { createSheetEngine, sheetCautions } from '#shared/engine'
import type { LineResult, SheetResult } from '#shared/engine/types'
import type { EngineQuestion, EngineReply } from './messages'

const engine = createSheetEngine({ significantDigits: 4 })
let latest: SheetResult = { lines: [] }
let sent = new Map<string, LineResult>()

/** Results that are not the ones sent before; the engine hands out the same object for what did not change. */
function changedResults(result: SheetResult): LineResult[] {
  latest = result
  const { lines } = result
  const changed = lines.filter(line => sent.get(line.id) !== line)
  sent = new Map(lines.map(line => [line.id, line]))
  return changed
}

function answer({ call, question }: EngineQuestion) {
  switch (call) {
    case 'evaluate': return changedResults(engine.evaluate(question))
    case 'response': return engine.response(question)
    case 'step': return engine.step(question)
    case 'typeset': return latexOf(question)
    case 'expression': return problemOf(question)
    case 'cautions': return sheetCautions(engine, latest, question)
  }
}

function latexOf(source: string): string | null {
  const typeset = engine.typesetExpression(source)
  return 'latex' in typeset ? typeset.latex : null
}

function problemOf(source: string): string | null {
  const problem = engine.evaluateExpression(source).problems.find(found => found.severity === 'error')
  return problem ? [problem.message, problem.hint].filter(Boolean).join(' ') : null
}

const reply = (message: EngineReply) => postMessage(message)

addEventListener('message', ({ data }: MessageEvent<EngineQuestion>) => {
  try {
    reply({ number: data.number, ok: true, answer: answer(data) })
  }
  catch (error) {
    reply({ number: data.number, ok: false, message: error instanceof Error ? error.message : 'the engine failed' })
  }
})
reply({ ready: true })
