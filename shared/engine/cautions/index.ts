/** Cautions of a sheet, computed from its own numbers: the work can hurt someone. */
import { CAPACITANCE, VOLTAGE, isNone, sameDimension } from '../quantity/dimension'
import type { LineResult, ResultValue, SheetResult } from '../types'
import { DANGEROUS_ENERGY, EXTRA_LOW_VOLTAGE, NOTABLE_PEAK, RESIDUAL } from './figures'
import { bleeder, ratioOfLevel, shown } from './numbers'

/** What a response block says of its surroundings; expressions as in a line, empty where nothing is said. */
export interface CautionBlock {
  blockId: string
  transfer: string
  /** Level at the input when it is switched on. */
  supply?: string
  /** Rating of the part at the output. */
  rating?: string
}

export interface SheetCaution {
  code: 'switch-on-overshoot' | 'resonance-rise' | 'above-rating' | 'above-extra-low-voltage' | 'stored-energy'
  message: string
  lineId?: string
  blockId?: string
}

/** The part of the engine that cautions ask. */
interface Asking {
  evaluateExpression(source: string): { value?: ResultValue }
}

/** @param result the last evaluation of the engine */
export function sheetCautions(engine: Asking, result: SheetResult, blocks: readonly CautionBlock[]): SheetCaution[] {
  return [
    ...blocks.flatMap(block => outputCautions(engine, block)),
    ...voltageCautions(result, blocks),
    ...energyCautions(engine, result, blocks),
  ]
}

interface Range { nominal: number, low: number, high: number }

function rangeOf(value: ResultValue | undefined): Range | undefined {
  if (value?.type === 'number') return { nominal: value.si, low: value.bounds?.low ?? value.si, high: value.bounds?.high ?? value.si }
  if (value?.type === 'level') return { nominal: value.db, low: value.bounds?.low ?? value.db, high: value.bounds?.high ?? value.db }
  return undefined
}

function voltage(engine: Asking, source: string | undefined): Range | undefined {
  if (source === undefined || source.trim() === '') return undefined
  const { value } = engine.evaluateExpression(source)
  return value?.type === 'number' && sameDimension(value.dimension, VOLTAGE) ? rangeOf(value) : undefined
}

function largest({ low, high }: Range): number {
  return Math.max(Math.abs(low), Math.abs(high))
}

/** What the output of a block reaches at switch-on, or at resonance. */
function outputCautions(engine: Asking, block: CautionBlock): SheetCaution[] {
  const { transfer, blockId } = block
  const supply = voltage(engine, block.supply)
  if (!supply) return []
  const rating = voltage(engine, block.rating)
  const peak = peakFactor(engine, transfer)
  if (peak && largest(peak) * largest(supply) > largest(supply) * 1.0001) return [switchOn(block, supply, peak, rating)]
  return resonance(engine, block, supply, rating) ?? steady(blockId, transfer, supply, peak, rating)
}

/** Largest value of the output for a unit step, at nominal values and over the tolerances. */
function peakFactor(engine: Asking, transfer: string): Range | undefined {
  const { value } = engine.evaluateExpression(`abs(${transfer}(0))*(1 + overshoot(${transfer}))`)
  return value?.type === 'number' && isNone(value.dimension) ? rangeOf(value) : undefined
}

function rated(rating: Range | undefined, reached: number): string {
  if (!rating) return ''
  return reached > Math.abs(rating.nominal) ? `, above its rating of ${shown(Math.abs(rating.nominal), 'V')}` : ` (rated ${shown(Math.abs(rating.nominal), 'V')})`
}

function switchOn({ transfer, blockId }: CautionBlock, supply: Range, peak: Range, rating: Range | undefined): SheetCaution {
  const nominal = Math.abs(supply.nominal) * peak.nominal
  const worst = largest(supply) * peak.high
  const reached = worst > nominal * 1.0005 ? `${shown(nominal, 'V')}, at worst case ${shown(worst, 'V')},` : shown(nominal, 'V')
  return {
    code: rating && worst > Math.abs(rating.nominal) ? 'above-rating' : 'switch-on-overshoot',
    message: `At switch-on the output of ${transfer} reaches ${reached} from a ${shown(Math.abs(supply.nominal), 'V')} supply${rated(rating, worst)}.`,
    blockId,
  }
}

function resonance(engine: Asking, { transfer, blockId }: CautionBlock, supply: Range, rating: Range | undefined): SheetCaution[] | undefined {
  const frequency = rangeOf(engine.evaluateExpression(`resonanceFrequency(${transfer})`).value)
  const gain = rangeOf(frequency && engine.evaluateExpression(`gain(${transfer}, resonanceFrequency(${transfer}))`).value)
  if (!frequency || !gain || gain.high < NOTABLE_PEAK) return undefined
  const reached = largest(supply) * ratioOfLevel(gain.high)
  return [{
    code: rating && reached > Math.abs(rating.nominal) ? 'above-rating' : 'resonance-rise',
    message: `At its resonance (${shown(frequency.nominal, 'Hz')}) ${transfer} raises its input by ${shown(gain.high, 'dB')}: ${shown(largest(supply), 'V')} there would become ${shown(reached, 'V')} at the output${rated(rating, reached)}.`,
    blockId,
  }]
}

/** Without overshoot or resonance the rating may still be too low. */
function steady(blockId: string, transfer: string, supply: Range, peak: Range | undefined, rating: Range | undefined): SheetCaution[] {
  if (!peak || !rating) return []
  const reached = largest(supply) * largest(peak)
  if (reached <= Math.abs(rating.nominal)) return []
  return [{ code: 'above-rating', message: `The output of ${transfer} reaches ${shown(reached, 'V')}, above its rating of ${shown(Math.abs(rating.nominal), 'V')}.`, blockId }]
}

interface Named { line: LineResult, name: string, size: number }

function valuesOf(result: SheetResult, dimension: typeof VOLTAGE): Named[] {
  return result.lines.flatMap((line) => {
    const { value, defines } = line
    if (defines === undefined || line.status === 'error' || value?.type !== 'number' || !sameDimension(value.dimension, dimension)) return []
    const range = rangeOf(value)
    return range ? [{ line, name: defines, size: largest(range) }] : []
  })
}

/** One caution for the highest voltage of the sheet; ratings are no voltages that occur. */
function voltageCautions(result: SheetResult, blocks: readonly CautionBlock[]): SheetCaution[] {
  const ratings = new Set(blocks.map(block => block.rating?.trim()))
  const voltages = valuesOf(result, VOLTAGE).filter(({ name, size }) => size > EXTRA_LOW_VOLTAGE.alternating && !ratings.has(name))
  const [first, ...rest] = voltages
  if (!first) return []
  const highest = rest.reduce((a, b) => b.size > a.size ? b : a, first)
  const others = voltages.length - 1
  const also = others === 0 ? '' : ` (so ${others === 1 ? 'is 1 other value' : `are ${others} other values`})`
  const { alternating, direct } = EXTRA_LOW_VOLTAGE
  const above = highest.size > direct ? 'above extra-low voltage' : 'above extra-low voltage if it alternates'
  return [{
    code: 'above-extra-low-voltage',
    message: `${highest.name} is ${shown(highest.size, 'V')}, ${above}${also}: IEC 61140 gives ${alternating} V a.c. and ${direct} V ripple-free d.c.`,
    lineId: highest.line.id,
  }]
}

/**
 * What a capacitor keeps after switch-off: at the supply of the block whose transfer function it is
 * part of; a sheet with a single supply means that one throughout.
 */
function energyCautions(engine: Asking, result: SheetResult, blocks: readonly CautionBlock[]): SheetCaution[] {
  const supplied = blocks.flatMap((block) => {
    const supply = voltage(engine, block.supply)
    return supply ? [{ volts: largest(supply), names: namesBehind(result, block.transfer) }] : []
  })
  const single = new Set(supplied.map(({ volts }) => volts)).size === 1
  return valuesOf(result, CAPACITANCE).flatMap(({ line, name, size }) => {
    const own = supplied.filter(({ names }) => single || names.has(name)).map(({ volts }) => volts)
    return energyCaution(name, size, Math.max(0, ...own), line.id)
  })
}

/** Every name that a transfer function is made of, followed through the lines. */
function namesBehind(result: SheetResult, transfer: string): Set<string> {
  const lines = new Map(result.lines.flatMap(line => line.defines === undefined ? [] : [[line.defines, line] as const]))
  const names = new Set<string>()
  const visit = (name: string) => {
    if (names.has(name)) return
    names.add(name)
    lines.get(name)?.uses.forEach(visit)
  }
  visit(transfer)
  return names
}

function energyCaution(name: string, farads: number, volts: number, lineId: string): SheetCaution[] {
  const energy = farads * volts * volts / 2
  const charge = farads * volts
  const residual = volts > RESIDUAL.voltage && charge > RESIDUAL.charge
  if (!residual && energy < DANGEROUS_ENERGY) return []
  const advice = residual
    ? `to bring it to ${RESIDUAL.voltage} V within ${RESIDUAL.seconds} s (IEC 60204-1, 6.2.4) takes at most ${shown(bleeder(farads, volts), 'Ω')} across it`
    : 'discharge it before touching it'
  return [{ code: 'stored-energy', message: `${name} keeps ${shown(energy, 'J')} at ${shown(volts, 'V')} after switch-off: ${advice}.`, lineId }]
}
