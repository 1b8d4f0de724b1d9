/**
 * `npm run check:sheets -- FOLDER`: evaluates every case file of a folder and holds the results
 * against figures computed elsewhere. Prints the worst error of each case and, last,
 * `N passed, M failed`; ends with 1 if any fails.
 */
import { readdirSync, statSync } from 'node:fs'
import { basename, join } from 'node:path'
import { readCase } from './check-sheets/case'
import { runCase } from './check-sheets/compare'
import type { Outcome } from './check-sheets/compare'

function caseFiles(folder: string): string[] {
  return readdirSync(folder).filter(name => name.endsWith('.json')).sort().map(name => join(folder, name))
}

function outcomeOf(file: string): { name: string, outcome: Outcome } {
  const test = readCase(file)
  if ('malformed' in test) return { name: basename(file), outcome: { failures: [`the case cannot be read: ${test.malformed}`], worst: undefined } }
  try {
    return { name: test.name, outcome: runCase(test) }
  }
  catch (error) {
    return { name: test.name, outcome: { failures: [`the engine broke off: ${error instanceof Error ? error.stack ?? error.message : String(error)}`], worst: undefined } }
  }
}

function report(file: string): boolean {
  const { name, outcome } = outcomeOf(file)
  const passed = outcome.failures.length === 0
  const worst = outcome.worst ? `worst ${outcome.worst.kind} error ${outcome.worst.error.toExponential(1)}` : 'no numbers compared'
  console.log(`${passed ? 'pass' : 'FAIL'}  ${basename(file)}  ${name}  (${worst})`)
  for (const failure of outcome.failures) console.log(`      ${failure}`)
  return passed
}

function main(folder: string | undefined): number {
  if (folder === undefined || !statSync(folder, { throwIfNoEntry: false })?.isDirectory()) {
    console.error(folder === undefined ? 'Name a folder of case files: npm run check:sheets -- FOLDER' : `${folder} is not a folder.`)
    console.log('0 passed, 0 failed')
    return 1
  }
  const results = caseFiles(folder).map(report)
  const passed = results.filter(Boolean).length
  if (results.length === 0) console.error(`${folder} holds no *.json file.`)
  console.log(`${passed} passed, ${results.length - passed} failed`)
  return passed === results.length && results.length > 0 ? 0 : 1
}

process.exitCode = main(process.argv[2])
