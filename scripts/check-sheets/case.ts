/** The case files of `npm run check:sheets`: read, and refused with words where they are malformed. */
import { readFileSync } from 'node:fs'
import { z } from 'zod'

const complexNumber = z.tuple([z.number(), z.number()])

const tolerances = { relative: z.number().nonnegative().optional(), absolute: z.number().nonnegative().optional() }

const valueExpectation = z.strictObject({
  value: z.string(),
  unit: z.string().default(''),
  is: z.union([z.number(), z.string(), complexNumber, z.array(z.union([z.number(), complexNumber]))]).optional(),
  low: z.number().optional(),
  high: z.number().optional(),
  ...tolerances,
}).refine(expectation => expectation.is !== undefined || expectation.low !== undefined || expectation.high !== undefined, 'an expectation of a value needs `is`, `low` or `high`')

const lineExpectation = z.strictObject({ line: z.int().positive(), status: z.enum(['ok', 'warning', 'error']) })

const requirementExpectation = z.strictObject({
  requirement: z.int().positive(),
  verdict: z.enum(['met', 'not met at worst case', 'not met']).optional(),
  margin: z.number().optional(),
  unit: z.string().default(''),
  ...tolerances,
}).refine(expectation => expectation.verdict !== undefined || expectation.margin !== undefined, 'an expectation of a requirement needs `verdict` or `margin`')

export const caseSchema = z.object({
  name: z.string(),
  lines: z.array(z.string()),
  expect: z.array(z.union([valueExpectation, lineExpectation, requirementExpectation])).min(1, 'a case expects something'),
})

export type SheetCase = z.infer<typeof caseSchema>
export type ValueExpectation = z.infer<typeof valueExpectation>
export type LineExpectation = z.infer<typeof lineExpectation>
export type RequirementExpectation = z.infer<typeof requirementExpectation>

/** A case, or what is wrong with its file. */
export function readCase(file: string): SheetCase | { malformed: string } {
  let data: unknown
  try {
    data = JSON.parse(readFileSync(file, 'utf8'))
  }
  catch (error) {
    return { malformed: `it is not JSON: ${error instanceof Error ? error.message : String(error)}` }
  }
  const parsed = caseSchema.safeParse(data)
  if (parsed.success) return parsed.data
  return { malformed: parsed.error.issues.map(issue => `${issue.path.join('.') || 'the file'}: ${issue.message}`).join('; ') }
}
