import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createEngineQueue, EngineStopped, type EngineWorker } from '~/composables/useEngineQueue'
import type { EngineQuestion, EngineReply } from '~/workers/messages'
import type { LineInput, LineResult, SheetInput } from '#shared/engine/types'

const result = (id: string, note: string): LineResult => ({ id, status: 'ok', kind: 'note', problems: [], uses: [], typeset: {}, note })
const sheet = (...lines: [string, string][]): SheetInput => ({ lines: lines.map(([id, source]): LineInput => ({ id, source })), settings: { significantDigits: 4 } })

/** A pretended worker: answers when told to, and hangs on a sheet that holds the word `forever`. */
function pretended() {
  const asked: EngineQuestion[] = []
  const workers: { reply: (reply: EngineReply) => void, ended: boolean }[] = []
  const shown: LineResult[][] = []
  const answer = () => {
    const question = asked.shift()
    const worker = workers.at(-1)
    if (!question || !worker) throw new Error('Nothing was asked.')
    if (question.call === 'evaluate') {
      if (question.question.lines.some(line => line.source.includes('forever'))) return
      worker.reply({ number: question.number, ok: true, answer: question.question.lines.map(line => result(line.id, line.source)) })
    }
    else worker.reply({ number: question.number, ok: true, answer: null })
  }
  const queue = createEngineQueue({
    patience: 100,
    startPatience: 1000,
    onResults: results => shown.push(results),
    spawn: (reply): EngineWorker => {
      const worker = { reply, ended: false }
      workers.push(worker)
      asked.length = 0
      return { post: question => asked.push(question), terminate: () => { worker.ended = true } }
    },
  })
  const ready = () => workers.at(-1)?.reply({ ready: true })
  return { queue, asked, workers, shown, answer, ready }
}

beforeEach(() => { vi.useFakeTimers() })
afterEach(() => { vi.useRealTimers() })

describe('the queue before the engine', () => {
  it('asks one question at a time and skips what was overtaken', () => {
    const { queue, asked, shown, answer, ready } = pretended()
    queue.evaluate(sheet(['a', '1']))
    expect(asked).toHaveLength(0)
    ready()
    queue.evaluate(sheet(['a', '2']))
    queue.evaluate(sheet(['a', '3']))
    expect(asked).toHaveLength(1)
    answer()
    answer()
    expect(asked).toHaveLength(0)
    expect(shown.map(results => results[0]?.note)).toEqual(['1', '3'])
  })

  it('answers null to a question that a newer one with its key replaced', async () => {
    const { queue, answer, ready } = pretended()
    ready()
    queue.evaluate(sheet(['a', '1']))
    const first = queue.ask('response r', 'typeset', 'x')
    const second = queue.ask('response r', 'typeset', 'y')
    await expect(first).resolves.toBeNull()
    answer()
    answer()
    await expect(second).resolves.toBeNull()
  })

  it('ends a worker that overruns, finds the line among many, and computes the rest', () => {
    const { queue, asked, workers, shown, answer, ready } = pretended()
    const lines = Array.from({ length: 13 }, (_, at): [string, string] => [`l${at}`, at === 8 ? 'forever' : `${at}`])
    queue.evaluate(sheet(...lines))
    for (let step = 0; step < 40 && shown.at(-1)?.[8]?.kind !== 'error'; step += 1) {
      ready()
      while (asked.length > 0) answer()
      vi.advanceTimersByTime(120)
    }
    ready()
    while (asked.length > 0) answer()
    const last = shown.at(-1)
    expect(last).toHaveLength(13)
    expect(last?.filter(line => line.kind === 'error').map(line => line.id)).toEqual(['l8'])
    expect(last?.[8]?.problems[0]?.message).toContain('takes too long')
    expect(last?.[12]?.note).toBe('12')
    expect(workers.slice(0, -1).every(worker => worker.ended)).toBe(true)
  })

  it('tries the line again when it has changed', () => {
    const { queue, asked, shown, answer, ready } = pretended()
    queue.evaluate(sheet(['a', '1'], ['b', 'forever']))
    for (let step = 0; step < 4; step += 1) {
      ready()
      while (asked.length > 0) answer()
      vi.advanceTimersByTime(120)
    }
    expect(shown.at(-1)?.[1]?.kind).toBe('error')
    queue.evaluate(sheet(['a', '1'], ['b', '2']))
    answer()
    expect(shown.at(-1)?.[1]?.note).toBe('2')
  })

  it('refuses a question that overruns, and goes on', async () => {
    const { queue, shown, answer, ready } = pretended()
    ready()
    queue.evaluate(sheet(['a', '1']))
    answer()
    const plot = queue.ask('response r', 'typeset', 'x')
    const refused = expect(plot).rejects.toBeInstanceOf(EngineStopped)
    vi.advanceTimersByTime(120)
    await refused
    ready()
    answer()
    expect(shown.at(-1)?.[0]?.note).toBe('1')
  })
})
