/** What a route's rule says, and how the five callers are judged by it. */
import type { Firm, Signed, World } from './world'

/** The kinds of caller that every route is tried with. */
export const CALLERS = ['nobody', 'client of another organisation', 'engineer who is no member', 'wrong role', 'right role'] as const
export type Caller = typeof CALLERS[number]

export interface Target {
  path: string
  body?: unknown
}

export type Expectation = number | readonly number[]

export interface Rule {
  /** The route's file. */
  file: string
  method: string
  /** Makes what is to be reached, in the given project. Called once for the firm's own and once for the foreign one. */
  target: (firm: Firm, world: World) => Promise<Target> | Target
  right: (world: World) => Signed
  wrong: (world: World) => Signed
  expect: Record<Caller, Expectation>
  /** What the right person gets for the same thing in a project that is not theirs; null where there is nothing of a project in it. */
  foreign: Expectation | null
  /** For lists: what the caller must not find in the answer. */
  hidden?: { from: readonly Caller[], text: (world: World) => string }
}

const fromFile = (file: string): { method: string } => ({ method: (/\.(get|post|put|patch|delete)\.ts$/.exec(file)?.[1] ?? 'get').toUpperCase() })

type People = { [K in keyof Firm]: Firm[K] extends Signed ? K : never }[keyof Firm]
export type Who = People | ((world: World) => Signed)
const person = (who: Who) => typeof who === 'function' ? who : (world: World) => world.own[who]

interface Given {
  right: Who
  wrong: Who
  target: Rule['target']
  expect?: Partial<Record<Caller, Expectation>>
  foreign?: Expectation | null
  hidden?: Rule['hidden']
}

const rule = (file: string, defaults: Record<Caller, Expectation>, foreign: Expectation | null, given: Given): Rule => ({
  file,
  ...fromFile(file),
  target: given.target,
  right: person(given.right),
  wrong: person(given.wrong),
  expect: { ...defaults, ...given.expect },
  foreign: given.foreign === undefined ? foreign : given.foreign,
  hidden: given.hidden,
})

const DONE = [200, 201, 202, 204]

/** Something that belongs to a project: who may not see it is told that it is not there. */
export const ofProject = (file: string, given: Given): Rule => rule(file, {
  'nobody': 401, 'client of another organisation': 404, 'engineer who is no member': 404, 'wrong role': 403, 'right role': DONE,
}, 404, given)

/** Something of the whole firm, for one role. */
export const ofFirm = (file: string, given: Given): Rule => rule(file, {
  'nobody': 401, 'client of another organisation': 403, 'engineer who is no member': 403, 'wrong role': 403, 'right role': DONE,
}, null, given)

/** A person's own affair: everyone who is signed in has it, and nobody that of another. */
export const ofPerson = (file: string, given: Omit<Given, 'right' | 'wrong'> & Partial<Pick<Given, 'right' | 'wrong'>>): Rule => rule(file, {
  'nobody': 401, 'client of another organisation': DONE, 'engineer who is no member': DONE, 'wrong role': DONE, 'right role': DONE,
}, null, { right: 'engineer', wrong: 'client', ...given })

/** Open to everybody on purpose: the same answer for all five. */
export const open = (file: string, path: string, answer: Expectation, body?: unknown): Rule => rule(file, {
  'nobody': answer, 'client of another organisation': answer, 'engineer who is no member': answer, 'wrong role': answer, 'right role': answer,
}, null, { right: 'engineer', wrong: 'client', target: () => ({ path, body }) })
