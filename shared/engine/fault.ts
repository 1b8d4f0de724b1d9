/** A user's mistake on its way to the line where it stands. Anything else that is thrown is a bug of ours. */
import type { Problem, SourceRange } from './types'

export class Fault extends Error {
  constructor(readonly problem: Problem) {
    super(problem.message)
    this.name = 'Fault'
  }
}

/** An error at a place in the line; `hint` says what to do about it. */
export function fault(code: string, message: string, hint?: string, at?: SourceRange): Fault {
  return new Fault({ code, severity: 'error', message, ...(hint === undefined ? {} : { hint }), ...(at === undefined ? {} : { at }) })
}

export function warning(code: string, message: string, hint?: string, at?: SourceRange): Problem {
  return { code, severity: 'warning', message, ...(hint === undefined ? {} : { hint }), ...(at === undefined ? {} : { at }) }
}

/** The same fault with a place, unless it has one. */
export function placed(error: unknown, at: SourceRange): unknown {
  if (!(error instanceof Fault) || error.problem.at !== undefined) return error
  return new Fault({ ...error.problem, at })
}
