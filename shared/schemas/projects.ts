import { z } from 'zod'
import { idSchema } from './people'

/** A line of text that a person types: trimmed, without control characters. */
export function lineOfText(what: string, most: number, least = 1) {
  return z.string({ error: `Type ${what}.` }).trim()
    .min(least, `Type ${what}.`).max(most, `At most ${most} characters.`)
    .regex(/^\P{Cc}*$/u, 'Without line breaks or tabs.')
}

/** Text of several lines. */
export function paragraphOfText(what: string, most: number, least = 1) {
  return z.string({ error: `Type ${what}.` }).trim().min(least, `Type ${what}.`).max(most, `At most ${most} characters.`)
}

const jobNumber = lineOfText('the job number', 40).regex(/^[\p{L}\p{N}][\p{L}\p{N} ./_-]*$/u, 'A job number is letters, digits, spaces and . / - _')
const people = (what: string) => z.array(idSchema).max(200, `At most 200 ${what}.`)
const checkLevel = z.union([z.literal(1), z.literal(2), z.literal(3)], 'Choose check level 1, 2 or 3.')
const revisionScheme = z.enum(['letters', 'numbers'], 'Choose letters or numbers.')

export const RELIANCE_NOTICE = 'This sheet was prepared for the client named on it and for the purpose stated. Nobody else may rely on it. It does not replace local codes or the judgement of a licensed engineer.'
const relianceNotice = paragraphOfText('the reliance notice', 2000)

export const createProjectSchema = z.strictObject({
  jobNumber,
  title: lineOfText('the title of the project', 200),
  clientId: idSchema.nullable(),
  revisionScheme: revisionScheme.default('letters'),
  checkLevel: checkLevel.default(2),
  relianceNotice: relianceNotice.default(RELIANCE_NOTICE),
  memberIds: people('members'),
  managerIds: people('managers').min(1, 'Name at least one manager, who approves and issues.'),
})

export const updateProjectSchema = z.strictObject({
  jobNumber: jobNumber.optional(),
  title: lineOfText('the title of the project', 200).optional(),
  clientId: idSchema.nullable().optional(),
  revisionScheme: revisionScheme.optional(),
  checkLevel: checkLevel.optional(),
  relianceNotice: relianceNotice.optional(),
  archived: z.boolean().optional(),
})

export const projectMembersSchema = z.strictObject({
  memberIds: people('members'),
  managerIds: people('managers').min(1, 'Name at least one manager, who approves and issues.'),
})

export const projectReferenceSchema = z.strictObject({
  kind: z.enum(['standard', 'client_document', 'other'], 'Choose standard, client document or other.'),
  designation: lineOfText('the designation, such as IEC 60063', 120),
  title: lineOfText('the title', 300),
  edition: lineOfText('the edition or revision', 80),
})
export const referenceParams = z.object({ id: idSchema, rid: idSchema })

export type CreateProject = z.output<typeof createProjectSchema>
export type UpdateProject = z.output<typeof updateProjectSchema>
export type ProjectMembers = z.output<typeof projectMembersSchema>
export type ProjectReferenceInput = z.output<typeof projectReferenceSchema>
