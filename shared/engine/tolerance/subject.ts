/** An output to be analysed: a value, or the margin of a requirement, as one real number. */
import { compileLine } from '../check/line'
import type { Relation } from '../check/comparison'
import type { CheckContext, Term } from '../check/term'
import { asNumber, mergedVariables, summedEffort } from '../check/term'
import { Fault, fault } from '../fault'
import type { Evaluation } from '../graph/evaluation'
import { leastValue, scalarKind, slackOf } from '../graph/requirement'
import type { Sheet } from '../graph/sheet'
import { LIMITS } from '../limits'
import type { ScalarKind } from '../quantity/kind'
import { parseLine } from '../syntax/parse'

export interface Subject {
  term: Term<ScalarKind>
  evaluation: Evaluation
  /** Of a requirement: whether it is met at the current point. */
  met?: () => boolean
}

/** Throws a Fault where the text is no value and no requirement. */
export function subjectOf(sheet: Sheet, source: string): Subject {
  const line = parseLine(source)
  if (!line.body) throw fault('tolerance-output', 'This output is empty.', 'Write a name, an expression or a requirement.')
  if (line.define) throw fault('definition-place', 'An output defines no name.', 'Leave out the part before `=`.', line.define.at)
  const { evaluation } = sheet
  const scope = { lookup: (name: string) => sheet.lookup(name), definedBelow: () => undefined }
  const compiled = compileLine(line, scope, contextOf(evaluation))
  if (compiled.type === 'requirement') return requirementSubject(compiled.condition.relations, evaluation)
  if (compiled.type !== 'value') throw fault('tolerance-output', 'A function has no single value that could be analysed.', 'Take a figure of it, such as `gain(H, 1 kHz)`.')
  const { term } = compiled
  if ((term.kind.type !== 'number' || term.kind.complex) && term.kind.type !== 'level') throw fault('tolerance-output', 'A tolerance analysis takes a single real value.', 'Take one item of a list, or `abs(x)` of a complex value.', term.at)
  return { term: { ...term, kind: term.kind }, evaluation }
}

function requirementSubject(relations: readonly Relation[], evaluation: Evaluation): Subject {
  const terms = relations.map(relation => relation.difference)
  const [first] = terms
  if (!first) throw fault('syntax', 'A side of this comparison is missing.')
  const slacks = relations.map(relation => slackOf(relation, undefined))
  const margin = (term: Term) => leastValue(term.run())
  return {
    evaluation,
    term: {
      kind: scalarKind(first.kind), at: first.at, variables: mergedVariables(terms), effort: summedEffort(terms),
      run: () => Math.min(...terms.map(margin)),
      ...(terms.length === 1 && first.dual && first.kind.type !== 'list' ? { dual: first.dual } : {}),
    },
    met: () => relations.every(({ difference, strict }, i) => {
      const d = margin(difference)
      const slack = slacks[i] ?? 0
      return strict ? d > slack : d >= -slack
    }),
  }
}

function contextOf(evaluation: Evaluation): CheckContext {
  let nodes = 0
  evaluation.startLine()
  return {
    evaluation,
    countNode: () => {
      nodes += 1
      if (nodes > LIMITS.compiledNodes) throw fault('too-much-work', 'This output takes too much work to compute.', 'Call fewer functions within functions.')
    },
    warn: () => undefined,
  }
}

/** The value with the variables at a point; NaN where it has none there. */
export function valueOrNothing(subject: Subject): number {
  try {
    return asNumber(subject.term.run())
  }
  catch (error) {
    if (error instanceof Fault) return NaN
    throw error
  }
}
