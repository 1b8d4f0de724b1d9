/** The refusals that a route may answer with. One shape: {statusCode, statusMessage, data: {code, field?, help}}. */
import { createError } from 'h3'
import type { H3Error } from 'h3'

export interface RefusalData {
  /** Stable, for programs. */
  code: string
  /** The input it is about, as a path: `members.2`. */
  field?: string
  /** For the person: what is wrong and what to do. */
  help: string
  /** What is needed to act on the refusal, such as who edited meanwhile. */
  details?: unknown
}

const STATUS: Record<number, string> = {
  400: 'Bad Request', 401: 'Unauthorized', 403: 'Forbidden', 404: 'Not Found', 409: 'Conflict', 411: 'Length Required',
  413: 'Content Too Large', 415: 'Unsupported Media Type', 429: 'Too Many Requests', 500: 'Internal Server Error', 503: 'Service Unavailable',
}

export function refusal(statusCode: number, data: RefusalData): H3Error<RefusalData> {
  return createError({ statusCode, statusMessage: STATUS[statusCode] ?? 'Error', message: data.help, data })
}

export const badInput = (field: string, help: string, code = 'invalid_input') => refusal(400, { code, field, help })

export const notSignedIn = (help = 'You are not signed in, or your session has ended. Sign in to go on.') =>
  refusal(401, { code: 'not_signed_in', help })

export const notAllowed = (help: string, code = 'not_allowed') => refusal(403, { code, help })

/** For what does not exist and for what is not yours alike. */
export const notFound = (help = 'There is no such thing here, or it belongs to a project that you are not a member of.') =>
  refusal(404, { code: 'not_found', help })

export const conflict = (code: string, help: string, details?: unknown) =>
  refusal(409, details === undefined ? { code, help } : { code, help, details })

export const tooManyTries = (seconds: number, help?: string) =>
  refusal(429, { code: 'too_many_tries', help: help ?? `Too many tries. Wait ${seconds} s and try again.`, details: { seconds } })

export const unavailable = (help: string) => refusal(503, { code: 'unavailable', help })
