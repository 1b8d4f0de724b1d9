import { ZodError } from 'zod'
import type { H3Event } from 'h3'

const UNEXPECTED = 'Something went wrong on our side, and it has been noted. What was saved is safe. Try again in a moment.'

interface Mutable { statusCode?: number, statusMessage?: string, message: string, data?: unknown, unhandled?: boolean, cause?: unknown }

/** What a validation of Nitro's own (`readValidatedBody(event, schema.parse)`) left behind. */
function zodErrorIn(error: Mutable): ZodError | null {
  return [error.data, error.cause, error].find(value => value instanceof ZodError) as ZodError | undefined ?? null
}

function giveShape(error: Mutable): void {
  const invalid = zodErrorIn(error)
  if (invalid) {
    const { statusCode, statusMessage, message, data } = inputProblem(invalid)
    Object.assign(error, { statusCode, statusMessage, message, data, unhandled: false })
  }
  else if (error.unhandled || ((error.statusCode ?? 500) >= 500 && !error.data)) {
    Object.assign(error, { statusCode: 500, statusMessage: 'Internal Server Error', message: UNEXPECTED, data: { code: 'unexpected', help: UNEXPECTED }, unhandled: false })
  }
  else if (!error.data && error.statusCode === 404) {
    error.data = notFound('There is no such page or address here.').data
  }
}

function note(error: Mutable, event: H3Event | undefined): void {
  const status = error.statusCode ?? 500
  const request = event ? { method: event.method, path: event.path.split('?')[0] } : {}
  if (error.unhandled || status >= 500) log('error', 'failed', { ...request, status, ...errorFields(error.cause ?? error) })
  else if (status === 401 || status === 403) log('warn', 'refused', { ...request, status, code: (error.data as { code?: string } | undefined)?.code })
}

/** Every error leaves in one shape, and those that are ours are logged. Runs before the handler that answers. */
export default defineNitroPlugin((nitroApp) => {
  nitroApp.hooks.hook('error', (error, { event }) => {
    note(error as Mutable, event)
    if (event) giveShape(error as Mutable)
  })
})
