/** Who does which kind of job. Handlers are registered at start-up, before the worker runs. */

export interface JobContext {
  id: string
  /** Unique for this work; the same at every attempt. */
  uniqueKey: string
  attempt: number
  /** Keeps the job from being taken by another worker while it goes on. False: another one has it already; stop without effect. */
  renew: () => Promise<boolean>
}

export interface JobHandler {
  /** Does the work. It may run again after a halt, so its effect must be the same when it does. Throws to be tried again. */
  run: (payload: unknown, context: JobContext) => Promise<void>
  /** After the last attempt has failed; tried again itself until it succeeds. */
  giveUp?: (payload: unknown, reason: string, context: JobContext) => Promise<void>
  attempts: number
  /** How long one attempt holds the job without renewing it, in milliseconds. */
  lease: number
  /** Pause before the second attempt, doubled for each further one up to an hour, in milliseconds. */
  pause: number
}

const handlers = new Map<string, JobHandler>()
const DEFAULTS = { attempts: 8, lease: 60_000, pause: 2000 }

export function registerJob(kind: string, handler: Pick<JobHandler, 'run'> & Partial<JobHandler>): void {
  handlers.set(kind, { ...DEFAULTS, ...handler })
}

export const handlerOf = (kind: string): JobHandler | undefined => handlers.get(kind)
export const registeredKinds = (): string[] => [...handlers.keys()]

const LONGEST_PAUSE = 60 * 60 * 1000
export const pauseBefore = (handler: JobHandler, attempt: number): number => Math.min(LONGEST_PAUSE, handler.pause * 2 ** Math.max(0, attempt - 1))
