/**
 * `npm run check:circuits -- FOLDER`: solves every case file of a folder and holds response and poles against
 * figures computed elsewhere. Prints the worst deviations of each case and, last, `N passed, M failed`; ends with
 * 1 if any fails.
 */
import { readdirSync, statSync } from 'node:fs'
import { basename, join } from 'node:path'
import { readCase } from './check-circuits/case'
import { runCase } from './check-circuits/compare'
import type { Outcome, Worst } from './check-circuits/compare'

function outcomeOf(file: string): { name: string, outcome: Outcome } {
  const test = readCase(file)
  if ('malformed' in test) return { name: basename(file), outcome: { failures: [`the case cannot be read: ${test.malformed}`], worst: undefined } }
  try {
    return { name: test.name, outcome: runCase(test) }
  }
  catch (error) {
    const why = error instanceof Error ? (error.name === 'Fault' ? error.message : error.stack ?? error.message) : String(error)
    return { name: test.name, outcome: { failures: [`the circuit was not solved: ${why}`], worst: undefined } }
  }
}

const short = (x: number) => x.toExponential(1)

function inWords({ relative, decibels, degrees, poles }: Worst): string {
  const response = `response ${short(decibels)} dB, ${short(degrees)}°, ${short(relative)} relative`
  return poles === undefined ? response : `${response}; poles ${short(poles)} relative`
}

function report(file: string): boolean {
  const { name, outcome } = outcomeOf(file)
  const passed = outcome.failures.length === 0
  console.log(`${passed ? 'pass' : 'FAIL'}  ${basename(file)}  ${name}  (worst: ${outcome.worst ? inWords(outcome.worst) : 'nothing compared'})`)
  for (const failure of outcome.failures) console.log(`      ${failure}`)
  return passed
}

function main(folder: string | undefined): number {
  if (folder === undefined || !statSync(folder, { throwIfNoEntry: false })?.isDirectory()) {
    console.error(folder === undefined ? 'Name a folder of case files: npm run check:circuits -- FOLDER' : `${folder} is not a folder.`)
    console.log('0 passed, 0 failed')
    return 1
  }
  const files = readdirSync(folder).filter(name => name.endsWith('.json')).sort().map(name => join(folder, name))
  const results = files.map(report)
  const passed = results.filter(Boolean).length
  if (results.length === 0) console.error(`${folder} holds no *.json file.`)
  console.log(`${passed} passed, ${results.length - passed} failed`)
  return passed === results.length && results.length > 0 ? 0 : 1
}

process.exitCode = main(process.argv[2])
