import { z } from 'zod'

/** 32 random bytes in base64url. */
export const printParams = z.object({ token: z.string().regex(/^[\w-]{43}$/) })
