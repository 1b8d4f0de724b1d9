import { z } from 'zod'

/** As people type a code from paper: small letters, blanks and hyphens are all the same; O and I, L are read as the digits they look like. */
export const normalCode = (typed: string): string =>
  typed.toUpperCase().replace(/[\s\u2010-\u2015-]/g, '').replaceAll('O', '0').replace(/[IL]/g, '1')

/** A verification code in a path. What cannot be a code is answered like an unknown one. */
export const verificationParams = z.object({ code: z.string().min(1).max(80).transform(normalCode) })
