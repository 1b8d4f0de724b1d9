/** L13: the verdict of a requirement at worst case, with both margins. */
import type { Relation } from '../check/comparison'
import type { Resolved } from '../check/resolved'
import { within } from '../check/resolved'
import type { Term, Value } from '../check/term'
import { asNumber, isList } from '../check/term'
import { TWO_PI, decibels } from '../numeric/math'
import { number } from '../quantity/kind'
import type { Kind, ScalarKind } from '../quantity/kind'
import { showNumber } from '../quantity/show'
import { worstCase } from '../tolerance/bounds'
import type { RequirementBarrier, RequirementResult, Verdict } from '../types'
import type { Evaluation } from './evaluation'
import { scaled, showScalar, storable } from './showing'

/** Parts of the larger side below which a margin counts as zero. */
const MARGIN_TOLERANCE = 1e-12

interface Judged { verdict: Verdict, worst: number, nominal: number, kind: ScalarKind, text: string, relation: Relation, item?: number }

const RANK: Record<Verdict, number> = { 'not met': 0, 'not met at worst case': 1, 'met': 2 }

export interface JudgeRequest {
  relations: readonly Relation[]
  subject: string
  untoleranced: string[]
  evaluation: Evaluation
  digits: number
}

export function judge({ relations, subject, untoleranced, evaluation, digits }: JudgeRequest): RequirementResult {
  const parts = relations.map(relation => judgeRelation(relation, evaluation))
  const worst = parts.reduce((a, b) => RANK[b.verdict] < RANK[a.verdict] || (RANK[b.verdict] === RANK[a.verdict] && b.worst < a.worst) ? b : a)
  const margin = Math.min(...parts.map(part => part.worst))
  const nominal = Math.min(...parts.map(part => part.nominal))
  const scale = scaled(worst.kind, margin, digits, limitDisplay(worst))
  const at = placeOf(worst, relations.length, digits)
  const barrier = relations.length === 1 && relations[0] ? barrierOf(relations[0]) : undefined
  return {
    verdict: worst.verdict,
    margin: showScalar(margin, scale, digits),
    marginSi: storable(margin),
    marginIn: worst.kind.type === 'level' ? { type: 'level' } : { type: 'number', dimension: worst.kind.dimension, ...(worst.kind.mark && { mark: worst.kind.mark }) },
    nominalMargin: showScalar(nominal, scale, digits),
    nominalMarginSi: storable(nominal),
    subject,
    untoleranced,
    ...(at === undefined ? {} : { at }),
    ...(barrier === undefined ? {} : { barrier }),
  }
}

/** The margin is shown in the unit of the limit. */
function limitDisplay(part: Judged): ScalarKind {
  const { kind } = part.relation.larger
  return kind.type === 'number' || kind.type === 'level' ? kind : part.kind
}

function judgeRelation(relation: Relation, evaluation: Evaluation): Judged {
  const { difference, strict, text } = relation
  const nominalValues = difference.run()
  const items = isList(nominalValues) ? nominalValues.map(asNumber) : [asNumber(nominalValues)]
  const nominal = Math.min(...items)
  const item = isList(nominalValues) ? items.indexOf(nominal) : undefined
  const kind = scalarKind(difference.kind)
  const worst = worstCase(leastOf(difference, kind), evaluation).low
  const slack = slackOf(relation, item)
  const met = (d: number) => strict ? d > slack : d >= -slack
  const verdict: Verdict = met(worst) ? 'met' : met(nominal) ? 'not met at worst case' : 'not met'
  return { verdict, worst, nominal, kind, text, relation, ...(item === undefined ? {} : { item }) }
}

export function scalarKind(kind: Kind): ScalarKind {
  if (kind.type === 'number' || kind.type === 'level') return kind
  if (kind.type === 'list') return kind.of
  return number([0, 0, 0, 0, 0, 0, 0])
}

/** The smallest item of a list as one value, so that its worst case is searched once. */
function leastOf(term: Term, kind: ScalarKind): Term {
  if (term.kind.type !== 'list') return term
  const { run, variables, effort, at } = term
  return { kind, variables, effort, at, run: () => leastValue(run()) }
}

export function leastValue(value: Value): number {
  return isList(value) ? Math.min(...value.map(asNumber)) : asNumber(value)
}

export function slackOf({ larger }: Relation, item: number | undefined): number {
  const value = larger.run()
  const side = isList(value) ? asNumber(value[item ?? 0] ?? 0) : asNumber(value)
  return Number.isFinite(side) ? MARGIN_TOLERANCE * Math.abs(side) : 0
}

/** Names the worst part where a requirement has several, or the worst frequency of a band. */
function placeOf(worst: Judged, count: number, digits: number): string | undefined {
  const frequency = worstFrequency(worst.relation)
  if (frequency !== undefined) {
    const shown = showNumber(frequency, number([0, 0, -1, 0, 0, 0, 0], { mark: 'Hz' }), digits)
    return `${shown.text} ${shown.unit}`
  }
  if (count > 1) return worst.text
  return worst.item === undefined ? undefined : `item ${worst.item + 1}`
}

function worstFrequency({ larger, smaller }: Relation): number | undefined {
  const worstAt = larger.worstAt ?? smaller.worstAt
  if (!worstAt) return undefined
  const omega = worstAt()
  return Number.isFinite(omega) ? omega / TWO_PI : undefined
}

const QUANTITIES = ['gain', 'attenuation', 'magnitude'] as const

/** The limit as a barrier on a plot, where one side is a figure at a frequency or over a band. */
function barrierOf(relation: Relation): RequirementBarrier | undefined {
  const { larger, smaller } = relation.nodes
  return barrier(larger, relation, 'at least') ?? barrier(smaller, relation, 'at most')
}

function barrier(side: Resolved, relation: Relation, sense: RequirementBarrier['sense']): RequirementBarrier | undefined {
  const call = within(side)
  if (call.type !== 'call') return undefined
  const quantity = QUANTITIES.find(name => name === call.name)
  const [transfer] = call.args
  const term = sense === 'at least' ? relation.larger : relation.smaller
  const limit = sense === 'at least' ? relation.smaller : relation.larger
  const range = term.frequencies?.()
  if (!quantity || transfer?.type !== 'name' || !range || call.args.length > 2 || isListKind(limit.kind)) return undefined
  const value = asNumber(limit.run())
  const level = quantity === 'magnitude' ? decibels(value) : value
  return Number.isFinite(level) ? { transfer: transfer.name, quantity, sense, limit: level, from: range.low / TWO_PI, to: range.high / TWO_PI } : undefined
}

function isListKind(kind: Kind): boolean {
  return kind.type === 'list'
}
