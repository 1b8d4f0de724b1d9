/** The lines of a sheet in reading order; what has not changed is kept from one evaluation to the next. */
import type { Entity, Scope } from '../check/scope'
import { Fault, fault } from '../fault'
import { LIMITS } from '../limits'
import { isCircuitValue } from '../quantity/dimension'
import type { ParsedLine } from '../syntax/node'
import { definedName } from '../syntax/parse'
import type { LineInput, LineResult, SheetInput, SheetResult } from '../types'
import { Evaluation } from './evaluation'
import { Influence } from './influence'
import { Readings } from './readings'
import { computeLine } from './record'
import type { Computed } from './record'
import { entityOf, isQuick, quickResult, ran } from './row'
import type { QuickRow, Row } from './row'
import { fitsSlot } from './shape'
import { ShapeBook } from './shapeBook'
import type { FoundShape } from './shapeBook'

/** What one edit did: the lines that were computed anew, in reading order. */
export interface Edited {
  readonly count: number
  readonly results: () => LineResult[]
}

/** One for all sheets: what it holds depends on nothing but the text and the kinds of values. */
const SHAPES = new ShapeBook()

export class Sheet {
  readonly evaluation = new Evaluation()
  private readonly readings = new Readings()
  private readonly shapes = SHAPES
  private kept = new Map<string, Row>()
  private rows: Row[] = []
  private names = new Map<string, Row>()
  private definitions = new Map<string, number>()
  private influence: Influence | undefined
  private inputs: LineInput[] = []
  private digits = 4
  private versions = 0
  /** Lines that the last evaluation computed anew. */
  recomputed = 0

  /** @param shares whether lines of one shape are compiled once; without, every line is compiled by itself, with the same results */
  constructor(private readonly shares = true) {}

  evaluate(input: SheetInput): SheetResult {
    this.update(input)
    return { lines: this.rows.map(row => this.resultOf(row)) }
  }

  /** Evaluates without making results that nobody looks at. */
  update(input: SheetInput): Edited {
    const before = this.versions
    this.compute(input.lines, clampDigits(input.settings.significantDigits))
    return this.since(before)
  }

  /**
   * Puts another text in place of one line's and computes that line and those that rest on it.
   * Throws where the last evaluation had no such line.
   */
  edit(id: string, source: string): Edited {
    const row = this.kept.get(id)
    const index = row ? this.rows.indexOf(row) : -1
    if (!row || index < 0) throw new Error('the sheet has no such line')
    this.inputs[index] = { id, source }
    const moved = this.move(row, index, source)
    if (moved) return moved
    const before = this.versions
    this.compute(this.inputs, this.digits)
    return this.since(before)
  }

  private since(version: number): Edited {
    const results = () => this.rows.filter(row => row.version > version).map(row => this.resultOf(row))
    return { count: this.recomputed, results }
  }

  /** A further line, in the scope after the last one. It defines nothing. */
  expression(source: string): Computed {
    const parsed = this.readings.parsed(source)
    const define = parsed instanceof Fault ? undefined : parsed.define
    if (define) return computedFault(fault('definition-place', 'An expression defines no name here.', 'Leave out the part before `=`.', define.at))
    return this.inFull(parsed, source, this.inputs.length)
  }

  /** What a name means after the last line. */
  lookup(name: string): Entity | undefined {
    return entityOf(this.names.get(name))
  }

  definedNames(): string[] {
    return [...this.names.keys()]
  }

  private compute(lines: readonly LineInput[], digits: number): void {
    this.digits = digits
    this.inputs = [...lines]
    this.recomputed = 0
    this.influence = undefined
    this.readings.begin()
    this.names = new Map()
    this.definitions = this.firstDefinitions(lines)
    const before = this.kept
    this.kept = new Map()
    this.rows = lines.map((line, index) => this.row(line, index, before.get(line.id)))
  }

  private row(input: LineInput, index: number, before: Row | undefined): Row {
    const row = this.quickRow(input, index, before) ?? this.fullRow(input, index, before)
    row.line = index + 1
    this.kept.set(input.id, row)
    // A kept line may have moved since it failed.
    if (row.entity?.type === 'failed') row.entity = { type: 'failed', line: index + 1 }
    if (row.name !== undefined && (row.shape || row.entity)) this.names.set(row.name, row)
    return row
  }

  private quickRow({ id, source }: LineInput, index: number, before: Row | undefined): Row | undefined {
    const outline = this.shares ? this.readings.outline(source) : null
    if (!outline || index >= LIMITS.lines || this.definitions.get(outline.name) !== index) return undefined
    const found = this.shapes.find(source, outline, word => this.names.get(word))
    if (!found) return undefined
    if (before?.source === source && before.digits === this.digits && isCurrent(before, found)) return before
    const { shape, suppliers, names } = found
    const row: QuickRow = {
      id, source, name: outline.name, line: index + 1, version: this.versions + 1, digits: this.digits, result: undefined, entity: undefined,
      kind: shape.kind, value: NaN, context: '', shape, suppliers, names, literal: outline.literal,
    }
    if (!ran(row)) return undefined
    this.versions += 1
    this.recomputed += 1
    return row
  }

  private fullRow({ id, source }: LineInput, index: number, before: Row | undefined): Row {
    const parsed = this.readings.parsed(source)
    const context = this.contextOf(parsed, source, index)
    if (before && !before.shape && before.source === source && before.digits === this.digits && before.context === context) return before
    this.recomputed += 1
    this.versions += 1
    const computed = index < LIMITS.lines ? this.inFull(parsed, source, index) : computedFault(fault('sheet-too-long', `A sheet holds at most ${LIMITS.lines} lines.`, 'Split it into several sheets.'))
    const { entity } = computed
    const single = entity?.type === 'value' && fitsSlot(entity.term) ? entity.term : undefined
    return {
      id, source, name: nameIn(parsed, source), line: index + 1, version: this.versions, digits: this.digits, result: { id, ...computed.result }, entity,
      kind: single?.kind, value: single ? single.run() as number : NaN, context, shape: undefined, suppliers: [], names: [], literal: undefined,
    }
  }

  private inFull(parsed: ParsedLine | Fault, source: string, index: number): Computed {
    const name = nameIn(parsed, source)
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

  /** An edit that moves values only: nothing is read or compiled but the line itself. */
  private move(row: Row, index: number, source: string): Edited | undefined {
    const outline = this.readings.outline(source)
    if (!isQuick(row) || !outline || outline.name !== row.name) return undefined
    const found = this.shapes.find(source, outline, word => this.above(word, index))
    if (!found || found.shape.kind !== row.kind || found.suppliers.some((one, i) => one !== row.suppliers[i])) return undefined
    this.influence ??= new Influence(this.rows, name => (this.names.get(name)?.line ?? 0) - 1)
    const affected = this.influence.of(index)
    if (!affected) return undefined
    row.source = source
    row.shape = found.shape
    row.names = found.names
    row.literal = outline.literal
    for (const one of affected) {
      if (!ran(one)) return undefined
      one.version = ++this.versions
      one.result = undefined
    }
    this.recomputed = affected.length
    return { count: affected.length, results: () => affected.map(one => this.resultOf(one)) }
  }

  private resultOf(row: Row): LineResult {
    return row.result ??= isQuick(row) ? quickResult(row) : unread(row.id)
  }

  private above(word: string, index: number): Row | undefined {
    const row = this.names.get(word)
    return row && row.line <= index ? row : undefined
  }

  private scopeAt(index: number, own: string | undefined): Scope {
    return {
      lookup: name => entityOf(this.above(name, index)),
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
      const name = nameIn(parsed, source)
      return `unreadable ${index} ${name === undefined ? '' : this.definitions.get(name)}`
    }
    const words = [...new Set(parsed.words)].map((word) => {
      const row = this.above(word, index)
      if (row) return `${word}@${row.version}${row.entity?.type === 'failed' ? `:${row.entity.line}` : ''}`
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
      const row = this.names.get(name)
      const entity = entityOf(row)
      if (!row || !entity) return
      const { uses } = this.resultOf(row)
      if (uses.length > 0) uses.forEach(visit)
      else if (isOpenPart(entity)) found.push(name)
    }
    names.forEach(visit)
    return found
  }

  /** Index of the first line that defines each name. */
  private firstDefinitions(lines: readonly LineInput[]): Map<string, number> {
    const definitions = new Map<string, number>()
    lines.forEach(({ source }, index) => {
      const name = this.readings.outline(source)?.name ?? nameIn(this.readings.parsed(source), source)
      if (name !== undefined && !definitions.has(name)) definitions.set(name, index)
    })
    return definitions
  }
}

/** Versions rise: a line computed after all that goes into it is still right. */
function isCurrent(row: Row, { shape, suppliers }: FoundShape): boolean {
  return row.shape === shape && suppliers.every((one, i) => one === row.suppliers[i] && one.version < row.version)
}

function unread(id: string): LineResult {
  return { id, ...computedFault(new Fault({ code: 'syntax', severity: 'error', message: '' })).result }
}

function nameIn(parsed: ParsedLine | Fault, source: string): string | undefined {
  return parsed instanceof Fault ? definedName(source) : parsed.define?.name
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
