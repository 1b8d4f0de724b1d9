/**
 * The queue before the engine's worker: one question at a time, the newest state of the sheet first, a worker
 * that overruns its time is ended and replaced, and the line that made it overrun is found and says so.
 * It knows nothing of Vue or of real workers, so that it can be tested with a pretended one.
 */
import type { EngineCall, EngineCalls, EngineQuestion, EngineReply } from '~/workers/messages'
import type { LineInput, LineResult, SheetInput } from '#shared/engine/types'

export interface EngineWorker {
  post: (question: EngineQuestion) => void
  terminate: () => void
}
export type SpawnEngine = (reply: (reply: EngineReply) => void, failed: (message: string) => void) => EngineWorker

/** The engine took longer than it may, or could not start; `message` is for the reader. */
export class EngineStopped extends Error {}

export interface EngineQueueOptions {
  spawn: SpawnEngine
  /** All results in the order of the lines, whenever some changed. */
  onResults: (results: LineResult[]) => void
  /** Longest time of one answer, and of a first start, in milliseconds. */
  patience?: number
  startPatience?: number
}

export interface EngineQueue {
  evaluate: (input: SheetInput) => void
  /** A question about the sheet as it was last evaluated. A newer one with the same key takes its place, which then answers null. */
  ask: <Call extends Exclude<EngineCall, 'evaluate'>>(key: string, call: Call, question: EngineCalls[Call]['question']) => Promise<EngineCalls[Call]['answer'] | null>
  destroy: () => void
}

interface Waiting { key: string, call: EngineCall, question: unknown, resolve: (answer: unknown) => void, reject: (error: Error) => void }
type Running = { number: number, sheet: LineInput[] } | { number: number, waiting: Waiting }

const OVERRUN = 'This line takes too long to compute and was stopped.'
const OVERRUN_HINT = 'Make it shorter or divide it; it is tried again when you change it.'
const BLOCK_OVERRUN = 'This takes too long to compute and was stopped. It is tried again when something in it changes.'

const keyOf = (line: LineInput) => `${line.id}\n${line.source}`

/**
 * Which lines may be at fault. A line that was once computed within its time is trusted until it changes;
 * of several others half are left out in turn until one is found.
 */
export function createSuspects() {
  let trusted = new Set<string>()
  const stopped = new Map<string, string>()
  let most: number | null = null
  const untrusted = (lines: readonly LineInput[]) => lines.filter(line => line.source.trim() !== '' && !trusted.has(keyOf(line)))
  return {
    /** The lines to send now: stopped ones, and all but the first of the suspects, are left empty. */
    select(lines: readonly LineInput[]): LineInput[] {
      let suspects = 0
      return lines.map((line) => {
        if (stopped.get(line.id) === line.source) return { id: line.id, source: '' }
        if (most === null || trusted.has(keyOf(line)) || line.source.trim() === '') return line
        suspects += 1
        return suspects <= most ? line : { id: line.id, source: '' }
      })
    },
    /** These lines were computed in time. True if others still wait for their turn. */
    passed(lines: readonly LineInput[]): boolean {
      trusted = new Set(lines.map(keyOf))
      const again = most !== null
      most = null
      return again
    },
    overran(lines: readonly LineInput[]): void {
      const suspects = untrusted(lines)
      const [only] = suspects
      if (only && suspects.length === 1) {
        stopped.set(only.id, only.source)
        most = null
      }
      else if (suspects.length > 1) most = Math.floor(suspects.length / 2)
      else trusted.clear()
    },
    isStopped: (line: LineInput) => stopped.get(line.id) === line.source,
  }
}

function stoppedResult(id: string): LineResult {
  return { id, status: 'error', kind: 'error', uses: [], typeset: {}, problems: [{ code: 'overrun', severity: 'error', message: OVERRUN, hint: OVERRUN_HINT }] }
}

export function createEngineQueue(options: EngineQueueOptions): EngineQueue {
  const { patience = 4000, startPatience = 30_000 } = options
  const suspects = createSuspects()
  const results = new Map<string, LineResult>()
  const stoppedResults = new Map<string, LineResult>()
  let waiting: Waiting[] = []
  let sheet: SheetInput | null = null
  let stale = false
  let running: Running | null = null
  let ready = false
  let failures = 0
  let number = 0
  let destroyed = false
  let timer: ReturnType<typeof setTimeout> | undefined
  let worker: EngineWorker | null = null

  function start() {
    ready = false
    worker = options.spawn(reply => receive(reply), message => abandon(message))
    watch(startPatience)
  }

  function watch(limit: number) {
    clearTimeout(timer)
    timer = setTimeout(overrun, limit)
  }

  /** Sends what is most wanted, if the worker is free. */
  function next() {
    if (destroyed || !ready || running || !worker) return
    if (stale && sheet) {
      stale = false
      const lines = suspects.select(sheet.lines)
      send({ number: ++number, sheet: lines }, { call: 'evaluate', question: { ...sheet, lines }, number })
      return
    }
    const first = waiting.shift()
    if (first) send({ number: ++number, waiting: first }, { call: first.call, question: first.question, number } as EngineQuestion)
  }

  function send(work: Running, question: EngineQuestion) {
    running = work
    watch(patience)
    worker?.post(question)
  }

  function receive(reply: EngineReply) {
    if (destroyed) return
    if ('ready' in reply) {
      ready = true
      clearTimeout(timer)
      next()
      return
    }
    if (!running || reply.number !== running.number) return
    clearTimeout(timer)
    const work = running
    running = null
    failures = 0
    if ('waiting' in work) settle(work.waiting, reply)
    else if (reply.ok) take(reply.answer as LineResult[], work.sheet)
    else publishFailure(reply.message)
    next()
  }

  function settle(work: Waiting, reply: Exclude<EngineReply, { ready: true }>) {
    if (reply.ok) work.resolve(reply.answer)
    else work.reject(new EngineStopped(reply.message))
  }

  function take(changed: LineResult[], sent: LineInput[]) {
    for (const result of changed) results.set(result.id, result)
    if (suspects.passed(sent)) stale = true
    publish()
  }

  /** The order is that of the newest sheet; a line that was just added has no result yet and stays out. */
  function publish() {
    const lines = sheet?.lines ?? []
    const present = new Set(lines.map(line => line.id))
    for (const id of results.keys()) if (!present.has(id)) results.delete(id)
    options.onResults(lines.flatMap((line) => {
      if (suspects.isStopped(line)) {
        const result = stoppedResults.get(line.id) ?? stoppedResult(line.id)
        stoppedResults.set(line.id, result)
        return [result]
      }
      const result = results.get(line.id)
      return result ? [result] : []
    }))
  }

  /** The engine itself failed on the sheet; its lines keep what they last showed but for a note at the first of them. */
  function publishFailure(message: string) {
    const first = sheet?.lines[0]
    if (!first) return
    results.set(first.id, { ...stoppedResult(first.id), problems: [{ code: 'engine-failed', severity: 'error', message: `The sheet could not be computed: ${message}`, hint: 'Undo the last change, or reload the page.' }] })
    publish()
  }

  function overrun() {
    if (destroyed) return
    const work = running
    worker?.terminate()
    running = null
    failures += 1
    if (work && 'waiting' in work) work.waiting.reject(new EngineStopped(BLOCK_OVERRUN))
    else if (work) suspects.overran(work.sheet)
    stale = sheet !== null
    if (failures > 40) return abandon('it stopped too often')
    start()
  }

  function abandon(message: string) {
    if (destroyed) return
    clearTimeout(timer)
    worker?.terminate()
    worker = null
    const lost = [...running && 'waiting' in running ? [running.waiting] : [], ...waiting]
    running = null
    waiting = []
    for (const work of lost) work.reject(new EngineStopped(message))
    publishFailure(message)
  }

  start()
  return {
    evaluate(input) {
      sheet = input
      stale = true
      next()
    },
    ask(key, call, question) {
      return new Promise((resolve, reject) => {
        const former = waiting.find(work => work.key === key)
        former?.resolve(null)
        waiting = waiting.filter(work => work !== former)
        waiting.push({ key, call, question, resolve: resolve as (answer: unknown) => void, reject })
        next()
      })
    },
    destroy() {
      destroyed = true
      clearTimeout(timer)
      worker?.terminate()
      for (const work of waiting) work.resolve(null)
    },
  }
}
