import { isMember, isManager, seeProject, type ProjectFacts } from './projects'
import { allOf, hasRole, isStaff, MAY, mayNot, type Actor } from './actor'
import { STATE_LABELS, type RevisionState } from '../workflow/revision'
import type { Ability, RevisionAbility } from '../types/api'

/** What decides about a revision, read under the lock where something depends on it. */
export interface RevisionFacts {
  state: RevisionState
  authorId: string
  /** Who signed the present submission as prepared. */
  submitterId: string | null
  checkerId: string | null
  /** Who signed the present submission as checked. */
  checkedById: string | null
  /** Whoever has an edit in it, or in what it was started from. */
  contributorIds: readonly string[]
  project: ProjectFacts
  lines: number
  /** By the present checker. */
  ticked: number
  openMustChange: number
  /** Whether another revision of the sheet is open, and whether a later one exists that was not cancelled. */
  openElsewhere: boolean
  hasLater: boolean
  /** Whether any revision of the sheet was ever issued. */
  sheetIssued: boolean
  hasPdf: boolean
}

type Rule = () => Ability
const RELEASED: readonly RevisionState[] = ['issued', 'superseded', 'withdrawn']
const NO_SUCH = 'There is no such sheet here, or it belongs to a project that you are not a member of.'

const rule = (holds: boolean, why: string): Rule => () => (holds ? MAY : mayNot(why))
const inState = (facts: RevisionFacts, ...states: RevisionState[]): Rule => () => states.includes(facts.state)
  ? MAY
  : mayNot(`It is ${STATE_LABELS[facts.state].toLowerCase()}, not ${states.map(state => STATE_LABELS[state].toLowerCase()).join(' or ')}.`, 'wrong_state')
const notYet = (done: boolean, why: string): Rule => () => (done ? MAY : mayNot(why, 'wrong_state'))
const openProject = (facts: RevisionFacts): Rule => notYet(!facts.project.archived, 'The project is archived. A manager can open it again.')

const contributed = (actor: Actor, facts: RevisionFacts) => facts.contributorIds.includes(actor.id)

/** Whether this person had a hand in the content, or put a name to it. */
export const hadAHand = (personId: string, facts: RevisionFacts): boolean =>
  facts.contributorIds.includes(personId) || facts.submitterId === personId || facts.authorId === personId

/** The firm's people by their project or as its checker; a client's people what was issued to their organisation. */
export const see = (actor: Actor, facts: RevisionFacts): Ability => allOf(() => {
  const clients = actor.organisationId !== null && actor.organisationId === facts.project.clientId && hasRole(actor, 'client')
  if (clients && RELEASED.includes(facts.state)) return MAY
  if (isStaff(actor) && facts.checkerId === actor.id) return MAY
  return isStaff(actor) && seeProject(actor, facts.project).may ? MAY : mayNot(NO_SUCH)
})

const edit = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  rule(isMember(actor, facts.project), 'Only members of the project edit its sheets.'),
  inState(facts, 'draft'),
  openProject(facts),
)

const submit = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  inState(facts, 'draft'),
  rule(isManager(actor) || (isMember(actor, facts.project) && (facts.authorId === actor.id || contributed(actor, facts))), 'Its author, a contributor or a manager submits it.'),
  openProject(facts),
)

const recall = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  inState(facts, 'for_checking'),
  rule(isStaff(actor) && (isManager(actor) || facts.submitterId === actor.id || facts.authorId === actor.id), 'Who submitted it, its author or a manager recalls it.'),
)

const asItsChecker = (actor: Actor, facts: RevisionFacts): Rule => () => allOf(
  rule(isStaff(actor) && hasRole(actor, 'checker') && facts.checkerId === actor.id, 'Only the checker who was asked does this.'),
  rule(!hadAHand(actor.id, facts), 'You contributed to this sheet or to what it was started from, so you cannot check it.'),
)

const annotate = (actor: Actor, facts: RevisionFacts): Ability => allOf(inState(facts, 'for_checking'), asItsChecker(actor, facts))

const approver = (actor: Actor, facts: RevisionFacts): Rule => () => allOf(
  rule(isManager(actor) && facts.project.managerIds.includes(actor.id), 'Only a manager authorised for this project does this.'),
  rule(actor.id !== facts.checkedById && actor.id !== facts.checkerId, 'You were its checker, so another manager has to do this.'),
  rule(!contributed(actor, facts) && facts.submitterId !== actor.id, 'You contributed to this sheet, so another manager has to do this.'),
)

const giveBack = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  inState(facts, 'for_checking', 'checked'),
  facts.state === 'checked' ? approver(actor, facts) : asItsChecker(actor, facts),
)

const plural = (count: number, one: string, several: string) => `${count} ${count === 1 ? one : several}`

const sign = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  inState(facts, 'for_checking'),
  asItsChecker(actor, facts),
  notYet(facts.ticked >= facts.lines, `${plural(facts.lines - facts.ticked, 'line is', 'lines are')} not ticked yet.`),
  notYet(facts.openMustChange === 0, `${plural(facts.openMustChange, 'annotation', 'annotations')} that must change ${facts.openMustChange === 1 ? 'is' : 'are'} not closed yet.`),
)

const approve = (actor: Actor, facts: RevisionFacts): Ability => allOf(inState(facts, 'checked'), approver(actor, facts))
const withdraw = (actor: Actor, facts: RevisionFacts): Ability => allOf(inState(facts, 'issued', 'superseded'), approver(actor, facts))

const revise = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  inState(facts, 'issued', 'withdrawn'),
  rule(isMember(actor, facts.project), 'Only members of the project start a revision.'),
  notYet(!facts.openElsewhere && !facts.hasLater, 'There is a later revision of this sheet already.'),
  openProject(facts),
)

const download = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  () => see(actor, facts),
  inState(facts, ...RELEASED),
  notYet(facts.hasPdf, 'There is no stamped file of it.'),
)

const reassign = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  inState(facts, 'for_checking'),
  rule(isManager(actor), 'Only a manager names another checker.'),
)

const cancel = (actor: Actor, facts: RevisionFacts): Ability => allOf(
  inState(facts, 'draft'),
  rule(isStaff(actor) && (isManager(actor) || (isMember(actor, facts.project) && facts.authorId === actor.id)), 'Its author or a manager cancels it.'),
)

const rename = (actor: Actor, facts: RevisionFacts): Ability => edit(actor, facts)

const POLICIES: Record<RevisionAbility, (actor: Actor, facts: RevisionFacts) => Ability> = {
  edit, submit, recall, annotate, tick: annotate, return: giveBack, sign, approve, withdraw, revise, download, reassign, cancel, rename,
}

/** Whether `actor` may do `what` with the revision. Who may not see it may do nothing with it. */
export const mayDo = (what: RevisionAbility, actor: Actor, facts: RevisionFacts): Ability =>
  allOf(() => see(actor, facts), () => POLICIES[what](actor, facts))

/** All of it, for buttons. */
export function abilities(actor: Actor, facts: RevisionFacts): Record<RevisionAbility, Ability> {
  const names = Object.keys(POLICIES) as RevisionAbility[]
  return Object.fromEntries(names.map(name => [name, mayDo(name, actor, facts)])) as Record<RevisionAbility, Ability>
}
