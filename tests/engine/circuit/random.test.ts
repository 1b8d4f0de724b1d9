/** A hundred random circuits against ngspice's AC analysis (golden file, made by tests/circuits/make.py with a fixed seed). */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { caseSchema } from '../../../scripts/check-circuits/case'
import { runCase } from '../../../scripts/check-circuits/compare'

interface Golden { circuits: object[] }

const { circuits } = JSON.parse(readFileSync(new URL('./random-circuits.json', import.meta.url), 'utf8')) as Golden

describe('the response of a random circuit', () => {
  it('has a hundred of them', () => expect(circuits).toHaveLength(100))

  it.each(circuits.map((circuit, i) => [i + 1, circuit] as const))('is that of ngspice: circuit %i', (_, circuit) => {
    const parsed = caseSchema.parse({ name: 'random', ...circuit, tolerance: { H: 1e-7 } })
    expect(runCase(parsed).failures).toEqual([])
  })
})
