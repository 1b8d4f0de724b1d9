/** Reading what a request brings. Each reader answers 400 with the field and words for a person. */
import { getHeader, getQuery, getRouterParams, readBody } from 'h3'
import type { H3Event } from 'h3'
import type { ZodError, ZodType } from 'zod'
import { badInput, refusal } from './errors'

/** The first thing that is wrong, at its place. */
export function inputProblem(error: ZodError) {
  const issue = error.issues[0]
  return badInput(issue?.path.map(String).join('.') ?? '', issue?.message ?? 'Something that was sent is not right.')
}

function parsed<T>(schema: ZodType<T>, value: unknown): T {
  const result = schema.safeParse(value)
  if (!result.success) throw inputProblem(result.error)
  return result.data
}

/** JSON only: a form of another site cannot send it without asking first. */
export async function bodyOf<T>(event: H3Event, schema: ZodType<T>): Promise<T> {
  const type = getHeader(event, 'content-type') ?? ''
  if (!/^application\/json\b/i.test(type)) {
    throw refusal(415, { code: 'json_only', help: 'Send JSON, with the header Content-Type: application/json.' })
  }
  const body: unknown = await readBody(event, { strict: true }).catch(() => {
    throw badInput('', 'The request is not well-formed JSON.', 'malformed_json')
  })
  return parsed(schema, body)
}

export const queryOf = <T>(event: H3Event, schema: ZodType<T>): T => parsed(schema, getQuery(event))

/** Path parameters. What does not even have the form of an id is not found, like an id that is not there. */
export function paramsOf<T>(event: H3Event, schema: ZodType<T>): T {
  const result = schema.safeParse(getRouterParams(event, { decode: true }))
  if (!result.success) throw refusal(404, { code: 'not_found', help: 'There is no such thing here.' })
  return result.data
}
