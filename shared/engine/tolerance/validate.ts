/** What is wrong with a request, in words, before anything is computed. */
import { fault } from '../fault'
import type { Sheet } from '../graph/sheet'
import type { Problem } from '../types'
import type { Range, ToleranceInput, ToleranceRequest } from './request'

export const SAMPLES = { least: 100, most: 100_000 } as const
const SEEDS = 4294967296
const COLDEST = -273.15

export function requestProblems(sheet: Sheet, request: ToleranceRequest): Problem[] {
  const problems: Problem[] = []
  const add = (code: string, message: string, hint?: string) => problems.push(fault(code, message, hint).problem)
  const { samples, seed, temperature } = request
  if (!Number.isInteger(samples) || samples < SAMPLES.least || samples > SAMPLES.most) add('tolerance-samples', `The number of samples is a whole number from ${SAMPLES.least} to 100,000.`)
  if (!Number.isInteger(seed) || seed < 0 || seed >= SEEDS) add('tolerance-seed', 'The seed is a whole number from 0 to 4294967295.')
  if (request.outputs.length === 0) add('tolerance-outputs', 'There is nothing to analyse.', 'Give a name, an expression or a requirement as output.')
  if (request.methods.length === 0) add('tolerance-methods', 'No method is chosen.', 'Choose worst case, root-sum-square or random samples.')
  if (temperature && !isRange(temperature)) add('tolerance-temperature', 'The lower temperature is not above the upper one.')
  if (temperature && !(Math.min(temperature.low, temperature.reference) >= COLDEST)) add('tolerance-temperature', 'No temperature is below −273.15 °C.')
  const names = request.inputs.map(input => input.name)
  names.filter((name, i) => names.indexOf(name) < i).forEach(name => add('tolerance-input', `\`${name}\` is set twice.`, 'Keep one of the rows.'))
  for (const input of request.inputs) problems.push(...inputProblems(sheet, input, temperature !== undefined))
  return problems
}

function inputProblems(sheet: Sheet, input: ToleranceInput, hasTemperature: boolean): Problem[] {
  const problems: Problem[] = []
  const { name, sigmas, coefficient, ageing } = input
  const add = (message: string, hint?: string) => problems.push(fault('tolerance-input', `\`${name}\`: ${message}`, hint).problem)
  const entity = sheet.lookup(name)
  const term = entity?.type === 'value' ? entity.term : undefined
  const scalar = term && (term.kind.type === 'number' || term.kind.type === 'level') ? term.kind : undefined
  if (!entity) add('this name is not defined in the sheet.', 'Choose a value that has a tolerance.')
  else if (entity.type === 'failed') add(`there is an error in line ${entity.line}.`, `Mend line ${entity.line} first.`)
  else if (!term?.variables.some(variable => variable.name === name)) add('this has no tolerance of its own.', `Write it as \`${name} = value ± 5 %\`.`)
  if (sigmas !== undefined && !(sigmas >= 0.5 && sigmas <= 8)) add('the limits lie 0.5 to 8 standard deviations from the nominal value.')
  if (coefficient && !isRange(coefficient)) add('the lower temperature coefficient is not above the upper one.')
  if (ageing && !isRange(ageing)) add('the lower ageing is not above the upper one.')
  if (ageing && ageing.low <= -100) add('ageing takes away less than 100 %.')
  if (coefficient && (coefficient.low !== 0 || coefficient.high !== 0) && !hasTemperature) add('a temperature coefficient needs a range of temperature.', 'Give the lowest and the highest temperature.')
  if ((coefficient || ageing) && scalar && (scalar.type === 'level' || scalar.point)) add('levels and temperatures take no coefficient and no ageing in percent.')
  return problems
}

function isRange({ low, high }: Range): boolean {
  return Number.isFinite(low) && Number.isFinite(high) && low <= high
}
