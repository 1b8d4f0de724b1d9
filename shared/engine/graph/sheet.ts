/** The lines of a sheet in reading order; what has not changed is kept from one evaluation to the next. */
import type { Entity, Scope } from '../check/scope'
import { Fault, fault } from '../fault'
import { LIMITS } from '../limits'
import { isCircuitValue } from '../quantity/dimension'
import type { ParsedLine } from '../syntax/node'
import { definedName, parseLine } from '../syntax/parse'
import type { LineInput, LineResult, SheetInput, SheetResult } from '../types'
import { Evaluation } from './evaluation'
import { computeLine } from './record'
import type { Computed } from './record'

interface Defined { entity: Entity, version: number, line: number }

interface Kept {
  source: string
  digits: number
  /** What each word of the line meant, and whether its own name was free. */
  context: string
  computed: Computed
  /** The same object from one evaluation to the next while nothing changes. */
  result: LineResult
  version: number
}

export class Sheet {
  readonly evaluation = new Evaluation()
  private readonly kept = new Map<string, Kept>()
  private parsed = new Map<string, ParsedLine | Fault>()
  private names = new Map<string, Defined>()
  private definitions = new Map<string, number>()
  private inputs: readonly LineInput[] = []
  private digits = 4
  private versions = 0
  /** Lines that the last evaluation computed anew. */
  recomputed = 0

  evaluate(input: SheetInput): SheetResult {
    this.digits = clampDigits(input.settings.significantDigits)
    this.inputs = input.lines
    this.recomputed = 0
    const parsed = this.parseAll(input.lines)
    this.names = new Map()
    this.definitions = firstDefinitions(input.lines, parsed)
    const lines = input.lines.map((line, index) => this.line(line, index, parsed[index] ?? new Fault({ code: 'syntax', severity: 'error', message: '' })))
    this.forget(new Set(input.lines.map(line => line.id)))
    return { lines }
  }

  /** A further line, in the scope after the last one. It defines nothing. */
  expression(source: string): Computed {
    const parsed = parseOrFault(source)
    const define = parsed instanceof Fault ? undefined : parsed.define
    if (define) return computedFault(fault('definition-place', 'An expression defines no name here.', 'Leave out the part before `=`.', define.at))
    return this.compute(parsed, source, this.inputs.length)
  }

  /** What a name means after the last line. */
  lookup(name: string): Entity | undefined {
    return this.names.get(name)?.entity
  }

  definedNames(): string[] {
    return [...this.names.keys()]
  }

  private parseAll(lines: readonly LineInput[]): (ParsedLine | Fault)[] {
    const before = this.parsed
    this.parsed = new Map()
    return lines.map(({ source }) => {
      const parsed = this.parsed.get(source) ?? before.get(source) ?? parseOrFault(source)
      this.parsed.set(source, parsed)
      return parsed
    })
  }

  private line(input: LineInput, index: number, parsed: ParsedLine | Fault): LineResult {
    const { id, source } = input
    const context = this.contextOf(parsed, source, index)
    const before = this.kept.get(id)
    const reusable = before && before.source === source && before.digits === this.digits && before.context === context
    const kept = reusable ? before : this.anew(id, source, context, parsed, index)
    const name = this.nameAt(parsed, source)
    const { entity } = kept.computed
    if (entity && name !== undefined) {
      // A kept line may have moved since it failed.
      const current: Entity = entity.type === 'failed' ? { type: 'failed', line: index + 1 } : entity
      this.names.set(name, { entity: current, version: kept.version, line: index + 1 })
    }
    return kept.result
  }

  private anew(id: string, source: string, context: string, parsed: ParsedLine | Fault, index: number): Kept {
    this.versions += 1
    this.recomputed += 1
    const computed = index < LIMITS.lines ? this.compute(parsed, source, index) : computedFault(fault('sheet-too-long', `A sheet holds at most ${LIMITS.lines} lines.`, 'Split it into several sheets.'))
    const kept = { source, digits: this.digits, context, computed, result: { id, ...computed.result }, version: this.versions }
    this.kept.set(id, kept)
    return kept
  }

  private compute(parsed: ParsedLine | Fault, source: string, index: number): Computed {
    const name = this.nameAt(parsed, source)
    const first = name === undefined ? undefined : this.definitions.get(name)
    return computeLine({
      parsed, source, name,
      line: index + 1,
      scope: this.scopeAt(index, name),
      firstDefinition: first !== undefined && first < index ? first + 1 : undefined,
      evaluation: this.evaluation,
      digits: this.digits,
      untoleranced: names => this.untoleranced(names),
    })
  }

  private nameAt(parsed: ParsedLine | Fault, source: string): string | undefined {
    return parsed instanceof Fault ? definedName(source) : parsed.define?.name
  }

  private scopeAt(index: number, own: string | undefined): Scope {
    const { names } = this
    return {
      lookup: (name) => {
        const defined = names.get(name)
        return defined && defined.line <= index ? defined.entity : undefined
      },
      definedBelow: (name) => {
        const line = this.definitions.get(name)
        return line !== undefined && line > index ? line + 1 : undefined
      },
      ...(own === undefined ? {} : { own }),
    }
  }

  /** All that the meaning of a line hangs on besides its own text. */
  private contextOf(parsed: ParsedLine | Fault, source: string, index: number): string {
    if (parsed instanceof Fault) {
      const name = this.nameAt(parsed, source)
      return `unreadable ${index} ${name === undefined ? '' : this.definitions.get(name)}`
    }
    const words = [...new Set(parsed.words)].map((word) => {
      const defined = this.names.get(word)
      if (defined) return `${word}@${defined.version}${defined.entity.type === 'failed' ? `:${defined.line}` : ''}`
      const line = this.definitions.get(word)
      return line === undefined || line === index ? word : `${word}<${line}`
    })
    const first = parsed.define ? this.definitions.get(parsed.define.name) : undefined
    const own = first !== undefined && first < index ? `second of ${first}` : ''
    return `${words.join(' ')}|${own}`
  }

  /** Circuit values without a tolerance, followed through the lines to those that use no name. */
  private untoleranced(names: readonly string[]): string[] {
    const found: string[] = []
    const seen = new Set<string>()
    const visit = (name: string) => {
      if (seen.has(name)) return
      seen.add(name)
      const defined = this.names.get(name)
      const id = defined && this.inputs[defined.line - 1]?.id
      const result = id === undefined ? undefined : this.kept.get(id)?.computed.result
      if (!defined || !result) return
      if (result.uses.length > 0) result.uses.forEach(visit)
      else if (isOpenPart(defined.entity)) found.push(name)
    }
    names.forEach(visit)
    return found
  }

  private forget(ids: ReadonlySet<string>): void {
    for (const id of this.kept.keys()) if (!ids.has(id)) this.kept.delete(id)
  }
}

function isOpenPart(entity: Entity): boolean {
  return entity.type === 'value' && entity.term.variables.length === 0 && entity.term.kind.type === 'number' && isCircuitValue(entity.term.kind.dimension)
}

function clampDigits(digits: number): number {
  return Number.isFinite(digits) ? Math.min(15, Math.max(1, Math.round(digits))) : 4
}

function computedFault(error: Fault): Computed {
  return { result: { status: 'error', kind: 'error', problems: [error.problem], uses: [], typeset: {} } }
}

function parseOrFault(source: string): ParsedLine | Fault {
  try {
    return parseLine(source)
  }
  catch (error) {
    if (error instanceof Fault) return error
    if (error instanceof RangeError) return fault('too-deep', 'This line is nested too deeply to be computed.', 'Give parts of it lines and names of their own.')
    throw error
  }
}

/** Index of the first line that defines each name. */
function firstDefinitions(lines: readonly LineInput[], parsed: readonly (ParsedLine | Fault)[]): Map<string, number> {
  const definitions = new Map<string, number>()
  lines.forEach(({ source }, index) => {
    const line = parsed[index]
    const name = line instanceof Fault || !line ? definedName(source) : line.define?.name
    if (name !== undefined && !definitions.has(name)) definitions.set(name, index)
  })
  return definitions
}
