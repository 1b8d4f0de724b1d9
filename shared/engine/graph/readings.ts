/** What has been read of each text; a text that was there at the last evaluation is not read again. */
import { Fault, fault } from '../fault'
import type { ParsedLine } from '../syntax/node'
import { parseLine } from '../syntax/parse'
import { outlineOf } from './outline'
import type { Outline } from './outline'

/** A text with what was read of it, kept over one evaluation in which it did not occur. */
class Remembered<T> {
  private now = new Map<string, T>()
  private before = new Map<string, T>()

  constructor(private readonly read: (source: string) => T) {}

  begin(): void {
    this.before = this.now
    this.now = new Map()
  }

  of(source: string): T {
    const known = this.now.get(source)
    if (known !== undefined) return known
    const value = this.before.get(source) ?? this.read(source)
    this.now.set(source, value)
    return value
  }
}

export class Readings {
  private readonly lines = new Remembered(parseOrFault)
  private readonly outlines = new Remembered<Outline | null>(source => outlineOf(source) ?? null)

  /** Starts an evaluation. */
  begin(): void {
    this.lines.begin()
    this.outlines.begin()
  }

  parsed(source: string): ParsedLine | Fault {
    return this.lines.of(source)
  }

  outline(source: string): Outline | null {
    return this.outlines.of(source)
  }
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
