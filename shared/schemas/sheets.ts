import { z } from 'zod'
import { REVISION_STATES } from '../workflow/revision'
import { idSchema } from './people'
import { lineOfText } from './projects'

export const sheetNumberSchema = lineOfText('the sheet number', 40).regex(/^[\p{L}\p{N}][\p{L}\p{N} ./_-]*$/u, 'A sheet number is letters, digits, spaces and . / - _')
export const sheetTitleSchema = lineOfText('the title of the sheet', 200)

export const sheetSettingsSchema = z.strictObject({
  significantDigits: z.int('Choose a whole number of digits.').min(2, 'At least 2 digits.').max(12, 'At most 12 digits.'),
  paper: z.enum(['A4', 'Letter'], 'Choose A4 or Letter.'),
})

/** `from` is a revision whose content and contributors the new sheet starts with; left out: a blank pad. */
export const createSheetSchema = z.strictObject({
  number: sheetNumberSchema,
  title: sheetTitleSchema,
  from: z.union([z.literal('').transform(() => undefined), idSchema]).optional(),
})

export const REGISTER_SORTS = ['number', '-number', 'title', '-title', 'state', '-state', 'since', '-since', 'due', '-due', 'revision', '-revision'] as const
export type RegisterSort = typeof REGISTER_SORTS[number]

const states = z.preprocess(
  value => (typeof value === 'string' ? value.split(',').filter(Boolean) : value),
  z.array(z.enum(REVISION_STATES, 'There is no such state.')).max(REVISION_STATES.length),
)

export const registerQuerySchema = z.object({
  state: states.optional(),
  q: z.string().trim().max(200, 'At most 200 characters.').optional(),
  sort: z.enum(REGISTER_SORTS, 'It cannot be sorted by this.').optional(),
})

export type CreateSheet = z.output<typeof createSheetSchema>
export type RegisterQuery = z.output<typeof registerQuerySchema>
export const candidatesQuerySchema = z.object({ revision: idSchema.optional() })
