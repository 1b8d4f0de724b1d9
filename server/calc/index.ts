/** Computes sheets in a process of its own, one after the other. A sheet that takes too long ends that process, not the server. */
import { fork, type ChildProcess } from 'node:child_process'
import { engineBundle } from './bundle'
import type { Computed } from './compute'
import type { SheetFigures } from './figures'
import type { CalcAnswer, CalcCall, CalcCalls, CalcQuestion } from './messages'
import type { SheetDocument } from '../../shared/document/types'
import type { EngineSettings } from '../../shared/engine/types'

export type { Caution, Computed } from './compute'
export interface RecordedComputation extends Computed { engineHash: string }

/** The sheet asks for more work than it may; the person is told so. */
export class ComputationOverrun extends Error {}

const LIMIT_MS = 20_000
const IDLE_MS = 60_000
const MEMORY_MB = 512

let child: ChildProcess | null = null
let idle: NodeJS.Timeout | undefined
let queue: Promise<unknown> = Promise.resolve()
let lastId = 0

function endChild(): void {
  clearTimeout(idle)
  child?.kill('SIGKILL')
  child = null
}

function openChild(path: string): ChildProcess {
  if (child?.connected) return child
  const fresh = fork(path, [], { execArgv: [`--max-old-space-size=${MEMORY_MB}`], serialization: 'advanced', stdio: ['ignore', 'ignore', 'ignore', 'ipc'], env: {} })
  fresh.once('exit', () => {
    if (child === fresh) child = null
  })
  child = fresh
  return fresh
}

function ask<C extends CalcCall>(process: ChildProcess, question: CalcQuestion & { call: C }, limit: number): Promise<CalcCalls[C]> {
  return new Promise((resolve, reject) => {
    const settle = (act: () => void) => {
      clearTimeout(timer)
      process.off('message', onMessage)
      process.off('exit', onExit)
      act()
    }
    const onMessage = (answer: CalcAnswer) => {
      if (answer.id !== question.id) return
      settle(() => (answer.ok ? resolve(answer.computed as CalcCalls[C]) : reject(new Error(answer.message))))
    }
    const onExit = () => settle(() => reject(new ComputationOverrun('The sheet needs more memory than a sheet may.')))
    const timer = setTimeout(() => {
      settle(() => reject(new ComputationOverrun(`The sheet takes more than ${limit / 1000} s to compute.`)))
      endChild()
    }, limit)
    process.on('message', onMessage)
    process.once('exit', onExit)
    process.send(question)
  })
}

interface Answered<C extends CalcCall> { answer: CalcCalls[C], engineHash: string }

async function askNow<C extends CalcCall>(call: C, document: SheetDocument, settings: EngineSettings, limit: number): Promise<Answered<C>> {
  const { path, hash } = await engineBundle()
  clearTimeout(idle)
  const answer = await ask(openChild(path), { id: ++lastId, call, document, settings }, limit)
  idle = setTimeout(endChild, IDLE_MS)
  idle.unref()
  return { answer, engineHash: hash }
}

function inTurn<C extends CalcCall>(call: C, document: SheetDocument, settings: EngineSettings, limit = LIMIT_MS): Promise<Answered<C>> {
  const next = queue.catch(() => undefined).then(() => askNow(call, document, settings, limit))
  queue = next
  return next
}

/** Throws `ComputationOverrun` when the sheet asks for too much; `limit` is in milliseconds. */
export async function computeSheet(document: SheetDocument, settings: EngineSettings, limit?: number): Promise<RecordedComputation> {
  const { answer, engineHash } = await inTurn('sheet', document, settings, limit)
  return { ...answer, engineHash }
}

/** Curves, step responses and formulas in prose, for the stamped sheet. Throws like `computeSheet`. */
export async function sheetFigures(document: SheetDocument, settings: EngineSettings): Promise<SheetFigures> {
  return (await inTurn('figures', document, settings)).answer
}

/** Ends the engine's process. */
export const closeCalc = (): void => endChild()
