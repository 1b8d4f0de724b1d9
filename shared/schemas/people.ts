import { z } from 'zod'
import { LIMITS } from '../limits'
import { ROLES } from '../people'
import { emailSchema, nameSchema } from './auth'

export const idSchema = z.string({ error: 'An id is missing.' }).regex(/^[0-9A-HJKMNP-TV-Z]{26}$/, 'This is not an id.')
export const idParams = z.object({ id: idSchema })

const initialsSchema = z.string({ error: 'Type the initials.' }).trim()
  .min(1, 'Type the initials.').max(LIMITS.initialsLength, `Initials have at most ${LIMITS.initialsLength} letters.`)
  .regex(/^[\p{L}.]+$/u, 'Initials are letters only.')

/** A person is either of the firm, with one or more of its roles, or of a client. The first role decides which work list opens first. */
const rolesSchema = z.array(z.enum(ROLES, 'Choose among engineer, checker, manager and client.'))
  .min(1, 'Choose at least one role.')
  .refine(roles => new Set(roles).size === roles.length, 'Each role once.')
  .refine(roles => !roles.includes('client') || roles.length === 1, 'A client\'s person has no role in the firm.')

interface Belonging { roles?: string[], organisationId?: string | null }

function checkBelonging({ roles, organisationId }: Belonging, context: z.RefinementCtx): void {
  if (!roles) return
  const client = roles.includes('client')
  if (client && !organisationId) context.addIssue({ code: 'custom', path: ['organisationId'], message: 'Choose the client that this person belongs to.' })
  if (!client && organisationId) context.addIssue({ code: 'custom', path: ['organisationId'], message: 'Only a client\'s person belongs to a client.' })
}

export const invitePersonSchema = z.strictObject({
  email: emailSchema,
  name: nameSchema,
  initials: initialsSchema,
  roles: rolesSchema,
  organisationId: idSchema.nullish(),
}).superRefine(checkBelonging)

export const updatePersonSchema = z.strictObject({
  name: nameSchema.optional(),
  initials: initialsSchema.optional(),
  roles: rolesSchema.optional(),
  organisationId: idSchema.nullish(),
  disabled: z.boolean().optional(),
}).superRefine(checkBelonging)

const organisationName = z.string({ error: 'Type the name of the client.' }).trim()
  .min(2, 'Type the name of the client.').max(LIMITS.organisationNameLength, `A name has at most ${LIMITS.organisationNameLength} characters.`)
  .regex(/^[^\p{Cc}<>]+$/u, 'A name is letters, digits, spaces and the usual marks.')

export const organisationSchema = z.strictObject({ name: organisationName })

export type InvitePerson = z.output<typeof invitePersonSchema>
export type UpdatePerson = z.output<typeof updatePersonSchema>
