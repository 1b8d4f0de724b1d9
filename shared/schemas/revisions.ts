import { z } from 'zod'
import { CHECK_METHODS, ISSUE_PURPOSES } from '../workflow/statements'
import { passwordSchema } from './auth'
import { idSchema } from './people'
import { lineOfText, paragraphOfText } from './projects'
import { sheetNumberSchema, sheetSettingsSchema, sheetTitleSchema } from './sheets'

/** What the writer saw; another version means that someone else was first. */
const version = z.int('The version is missing. Load the page again.').min(1)
/** SHA-256 of the content that was on the screen. */
const contentHash = z.string({ error: 'The hash of what was shown is missing. Load the page again.' }).regex(/^[0-9a-f]{64}$/, 'This is not a hash.')
const day = z.iso.date('Choose a date.')
const reason = (what: string) => paragraphOfText(what, 4000, 3)
export const lineIdSchema = z.string().min(1).max(80)

export const acceptanceSchema = z.strictObject({
  lineId: lineIdSchema.nullable(),
  what: z.string().min(1).max(2000),
  reason: paragraphOfText('the reason why it is accepted', 2000, 3),
})

export const submitSchema = z.strictObject({
  version,
  hash: contentHash,
  checkerId: idSchema,
  due: day.nullable().default(null),
  acceptances: z.array(acceptanceSchema).max(1000).default([]),
  password: passwordSchema,
})
export const recallSchema = z.strictObject({ version, reason: reason('the reason').optional() })
export const returnSchema = z.strictObject({ version, submissionHash: contentHash, reason: reason('the reason for returning it') })
export const signSchema = z.strictObject({
  version,
  submissionHash: contentHash,
  method: z.enum(CHECK_METHODS, 'Choose how it was checked.'),
  extent: paragraphOfText('the extent of the check', 2000, 3),
  password: passwordSchema,
})
export const approveSchema = z.strictObject({
  version,
  submissionHash: contentHash,
  purpose: z.enum(ISSUE_PURPOSES, 'Choose the purpose of the issue.'),
  password: passwordSchema,
})
export const withdrawSchema = z.strictObject({ version, reason: reason('the reason for withdrawing it'), password: passwordSchema })
export const reviseSchema = z.strictObject({ version: version.optional(), reason: paragraphOfText('the reason for revision', 2000, 3) })
export const reassignSchema = z.strictObject({ version, checkerId: idSchema, due: day.nullable() })
export const cancelSchema = z.strictObject({ version })
export const renameSchema = z.strictObject({
  title: sheetTitleSchema.optional(),
  number: sheetNumberSchema.optional(),
  settings: sheetSettingsSchema.optional(),
})

export const annotationSchema = z.strictObject({
  kind: z.enum(['must_change', 'query', 'remark'], 'Choose must change, query or remark.'),
  text: paragraphOfText('the annotation', 4000),
  blockId: lineIdSchema.nullable().default(null),
  quote: z.string().max(2000).default(''),
  from: z.int().min(0).nullable().default(null),
  to: z.int().min(0).nullable().default(null),
})
export const replySchema = z.strictObject({ text: paragraphOfText('the answer', 4000) })
export const tickParams = z.object({ id: idSchema, lineId: lineIdSchema })
export const attachmentNameSchema = lineOfText('the name of the file', 200)

export type Submit = z.output<typeof submitSchema>
export type Recall = z.output<typeof recallSchema>
export type Return = z.output<typeof returnSchema>
export type Sign = z.output<typeof signSchema>
export type Approve = z.output<typeof approveSchema>
export type Withdraw = z.output<typeof withdrawSchema>
export type Revise = z.output<typeof reviseSchema>
export type Reassign = z.output<typeof reassignSchema>
export type Rename = z.output<typeof renameSchema>
export type Annotate = z.output<typeof annotationSchema>
