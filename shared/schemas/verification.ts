import { z } from 'zod'

/** As people type a code from paper: small letters, blanks and hyphens do not matter. Groups of four, as it is stored. */
export const normalCode = (typed: string): string =>
  typed.toUpperCase().replace(/[\s\u2010-\u2015-]/g, '').match(/.{1,4}/g)?.join('-') ?? ''

/** A verification code in a path. What cannot be a code is answered like an unknown one. */
export const verificationParams = z.object({ code: z.string().min(1).max(80).transform(normalCode) })
