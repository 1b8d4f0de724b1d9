/** Loading and editing sheets, against mathjs with its units. */
import { all, create } from 'mathjs'
import type { EvalFunction, Unit } from 'mathjs'
import { createSheetEngine } from '../../shared/engine'
import type { SheetEngine } from '../../shared/engine'
import { compare } from './interleave'
import type { BenchRow, Side } from './interleave'
import { asInput, chain, sections, SETTINGS } from './sheets'

const math = create(all ?? {})

type Scope = Map<string, unknown>

/** An input of the sheet whose number is another at every edit, as when somebody types. */
function typing(unit: string): () => string {
  let count = 0
  return () => `${(4 + (count = (count + 1) % 9000) / 10_000).toFixed(4)} ${unit}`
}

function loading(name: string, length: number): BenchRow {
  const sources = sections(length)
  const input = asInput(sources)
  const load = (times: number) => {
    for (let i = 0; i < times; i += 1) createSheetEngine(SETTINGS).update(input)
  }
  const theirs = (times: number) => {
    for (let i = 0; i < times; i += 1) {
      const scope: Scope = new Map()
      for (const source of sources) math.evaluate(source, scope)
    }
  }
  agree(opened(sources), evaluated(sources), sources)
  return compare(name, 'mathjs evaluate', { run: load }, { run: theirs })
}

function opened(sources: readonly string[]): SheetEngine {
  const engine = createSheetEngine(SETTINGS)
  engine.evaluate(asInput(sources))
  return engine
}

function evaluated(sources: readonly string[]): Scope {
  const scope: Scope = new Map()
  for (const source of sources) math.evaluate(source, scope)
  return scope
}

const nameOf = (source: string) => source.split(' ')[0] ?? ''

/** Both sides give the same numbers, or the comparison says nothing. */
function agree(engine: SheetEngine, scope: Scope, sources: readonly string[]): void {
  for (const name of [1, 2, 3, 4].map(back => nameOf(sources.at(-back) ?? ''))) {
    const { value } = engine.evaluateExpression(name)
    const theirs = (scope.get(name) as Unit).toSI().toNumeric() as number
    if (value?.type !== 'number' || Math.abs(value.si / theirs - 1) > 1e-12) throw new Error(`${name} is ${JSON.stringify(value)} here and ${theirs} in mathjs`)
  }
}

/** One line is typed anew each time. Of the peer, whole sheets are evaluated from their text; picked lines are compiled beforehand. */
function editing(sources: readonly string[], index: number, unit: string, count: number) {
  const engine = opened(sources)
  const [text, name] = [typing(unit), nameOf(sources[index] ?? '')]
  const ours: Side = {
    run: (times) => {
      for (let i = 0; i < times; i += 1) {
        const edited = engine.edit(`line-${index}`, `${name} = ${text()}`)
        if (edited.count !== count) throw new Error(`${edited.count} lines were computed, not ${count}`)
      }
    },
  }
  const scope = evaluated(sources)
  const compiled: (EvalFunction | undefined)[] = sources.map(source => math.compile(source))
  const picked = (lines: readonly number[]): Side => ({
    run: (times) => {
      for (let i = 0; i < times; i += 1) {
        math.evaluate(`${name} = ${text()}`, scope)
        for (const line of lines) compiled[line]?.evaluate(scope)
      }
    },
  })
  const whole: Side = {
    run: (times) => {
      for (let i = 0; i < times; i += 1) sources.forEach((source, line) => math.evaluate(line === index ? `${name} = ${text()}` : source, scope))
    },
  }
  return { ours, picked, whole }
}

export function lineRows(): BenchRow[] {
  const three = editing(sections(2000), 1000, 'kohm', 4)
  const every = editing(chain(2000), 0, 'V', 2000)
  return [
    loading('load-500', 500),
    loading('load-2000', 2000),
    compare('edit-3-whole', 'mathjs evaluate, whole sheet', three.ours, three.whole),
    compare('edit-3-affected', 'mathjs compiled, the lines affected', three.ours, three.picked([1002, 1003, 1004])),
    compare('edit-all', 'mathjs evaluate, whole sheet', every.ours, every.whole),
  ]
}
