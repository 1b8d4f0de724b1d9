import { z } from 'zod'
import { LIMITS } from '../limits'
import { passwordProblem } from '../people'

/** One spelling an address: trimmed, small letters. */
export const emailSchema = z.string({ error: 'Type an e-mail address.' }).trim().toLowerCase()
  .max(LIMITS.emailLength, `An e-mail address has at most ${LIMITS.emailLength} characters.`)
  .pipe(z.email('This is not an e-mail address. It looks like name@firm.example.'))

/** A password that is to be kept. */
export const newPasswordSchema = z.string({ error: 'Choose a password.' }).superRefine((password, context) => {
  const problem = passwordProblem(password)
  if (problem) context.addIssue({ code: 'custom', message: problem })
})

/** A password that is to be compared: any text, bounded. */
export const passwordSchema = z.string({ error: 'Type your password.' })
  .min(1, 'Type your password.').max(LIMITS.passwordLength.max, 'That is longer than any password here.')

const tokenSchema = z.string().regex(/^[\w-]{43}$/, 'This link is not complete. Copy it whole from the e-mail.')

export const nameSchema = z.string({ error: 'Type a name.' }).trim()
  .min(2, 'Type the full name.').max(LIMITS.nameLength, `A name has at most ${LIMITS.nameLength} characters.`)
  .regex(/^[^\p{Cc}<>]+$/u, 'A name is letters, spaces and the usual marks.')

export const signInSchema = z.strictObject({ email: emailSchema, password: passwordSchema })
export const acceptInvitationSchema = z.strictObject({ token: tokenSchema, name: nameSchema.optional(), password: newPasswordSchema })
export const resetRequestSchema = z.strictObject({ email: emailSchema })
export const resetSchema = z.strictObject({ token: tokenSchema, password: newPasswordSchema })
export const changePasswordSchema = z.strictObject({ current: passwordSchema, next: newPasswordSchema })
export const linkTokenParams = z.object({ token: tokenSchema })
