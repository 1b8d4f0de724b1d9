import { describe, expect, it } from 'vitest'
import { guarded, type Actor } from '../../../../shared/policies/actor'
import { close, reopen, reply, type AnnotationFacts } from '../../../../shared/policies/annotations'
import { whyNotChecker } from '../../../../shared/policies/checkers'
import { editProject, seeProject, workInProject } from '../../../../shared/policies/projects'
import { abilities, mayDo, see, type RevisionFacts } from '../../../../shared/policies/revisions'
import type { RevisionAbility, Role } from '../../../../shared/types/api'
import { REVISION_STATES, type RevisionState } from '../../../../shared/workflow/revision'

const person = (id: string, roles: Role[], organisationId: string | null = null): Actor => ({ id, name: id, initials: id, roles, organisationId, sessionId: 's' })
const author = person('author', ['engineer'])
const colleague = person('colleague', ['engineer'])
const checker = person('checker', ['checker', 'engineer'])
const otherChecker = person('otherChecker', ['checker'])
const manager = person('manager', ['manager'])
const otherManager = person('otherManager', ['manager'])
const outsider = person('outsider', ['engineer'])
const client = person('client', ['client'], 'ferries')
const foreign = person('foreign', ['client'], 'water')
const everybody = { author, colleague, checker, otherChecker, manager, otherManager, outsider, client, foreign }

const facts = (over: Partial<RevisionFacts> = {}): RevisionFacts => ({
  state: 'draft', authorId: 'author', submitterId: 'author', checkerId: 'checker', checkedById: null, contributorIds: ['author'],
  project: { memberIds: ['author', 'colleague', 'checker', 'otherChecker'], managerIds: ['manager'], clientId: 'ferries', archived: false },
  lines: 3, ticked: 3, openMustChange: 0, openElsewhere: false, hasLater: false, sheetIssued: false, hasPdf: true, ...over,
})

const who = (what: RevisionAbility, over: Partial<RevisionFacts>) =>
  Object.entries(everybody).filter(([, actor]) => mayDo(what, actor, facts(over)).may).map(([name]) => name)

describe('who may do what, state by state', () => {
  it.each<[RevisionAbility, Partial<Record<RevisionState, string[]>>]>([
    ['edit', { draft: ['author', 'colleague', 'checker', 'otherChecker', 'manager'] }],
    ['rename', { draft: ['author', 'colleague', 'checker', 'otherChecker', 'manager'] }],
    ['submit', { draft: ['author', 'manager', 'otherManager'] }],
    ['cancel', { draft: ['author', 'manager', 'otherManager'] }],
    ['recall', { for_checking: ['author', 'manager', 'otherManager'] }],
    ['annotate', { for_checking: ['checker'] }],
    ['tick', { for_checking: ['checker'] }],
    ['sign', { for_checking: ['checker'] }],
    ['return', { for_checking: ['checker'], checked: ['manager'] }],
    ['reassign', { for_checking: ['manager', 'otherManager'] }],
    ['approve', { checked: ['manager'] }],
    ['withdraw', { issued: ['manager'], superseded: ['manager'] }],
    ['revise', { issued: ['author', 'colleague', 'checker', 'otherChecker', 'manager'], withdrawn: ['author', 'colleague', 'checker', 'otherChecker', 'manager'] }],
    ['download', Object.fromEntries((['issued', 'superseded', 'withdrawn'] as const).map(state => [state, ['author', 'colleague', 'checker', 'otherChecker', 'manager', 'otherManager', 'client']]))],
  ])('%s', (what, allowed) => {
    for (const state of REVISION_STATES) expect([state, who(what, { state })]).toEqual([state, allowed[state] ?? []])
  })

  it('is seen by its project, by managers, and by its client once issued', () => {
    const seen = (state: RevisionState) => Object.entries(everybody).filter(([, actor]) => see(actor, facts({ state })).may).map(([name]) => name)
    const staff = ['author', 'colleague', 'checker', 'otherChecker', 'manager', 'otherManager']
    for (const state of ['draft', 'for_checking', 'checked', 'issuing', 'cancelled'] as const) expect(seen(state)).toEqual(staff)
    for (const state of ['issued', 'superseded', 'withdrawn'] as const) expect(seen(state)).toEqual([...staff, 'client'])
  })
})

describe('independence', () => {
  it('keeps every contributor from checking, and who submitted or started it', () => {
    for (const over of [{ contributorIds: ['author', 'checker'] }, { submitterId: 'checker' }, { authorId: 'checker' }]) {
      for (const what of ['tick', 'annotate', 'sign', 'return'] as const) expect(who(what, { state: 'for_checking', ...over })).toEqual([])
    }
  })

  it('keeps the checker and every contributor from approving', () => {
    const both = { project: { ...facts().project, managerIds: ['manager', 'otherManager'] }, state: 'checked' as const }
    expect(who('approve', both)).toEqual(['manager', 'otherManager'])
    expect(who('approve', { ...both, checkedById: 'manager' })).toEqual(['otherManager'])
    expect(who('approve', { ...both, contributorIds: ['manager'] })).toEqual(['otherManager'])
    expect(who('approve', { ...both, submitterId: 'manager' })).toEqual(['otherManager'])
  })

  it('says why a person cannot be asked', () => {
    const candidate = { id: 'otherChecker', roles: ['checker'] as Role[], disabled: false, organisationId: null }
    expect(whyNotChecker(candidate, facts(), 'author')).toBeNull()
    expect(whyNotChecker({ ...candidate, disabled: true }, facts(), 'author')).toContain('not a checker')
    expect(whyNotChecker({ ...candidate, roles: ['engineer'] }, facts(), 'author')).toContain('not a checker')
    expect(whyNotChecker({ ...candidate, id: 'stranger' }, facts(), 'author')).toContain('member')
    expect(whyNotChecker(candidate, facts({ contributorIds: ['otherChecker'] }), 'author')).toContain('contributed')
    expect(whyNotChecker(candidate, facts(), 'otherChecker')).toContain('contributed')
  })
})

describe('what is missing', () => {
  it('is said in words and is a matter of state, not of rights', () => {
    const unticked = mayDo('sign', checker, facts({ state: 'for_checking', ticked: 2 }))
    expect(unticked).toEqual({ may: false, why: '1 line is not ticked yet.', code: 'wrong_state' })
    expect(mayDo('sign', checker, facts({ state: 'for_checking', openMustChange: 2 }))).toMatchObject({ why: '2 annotations that must change are not closed yet.' })
    expect(mayDo('revise', author, facts({ state: 'issued', openElsewhere: true }))).toMatchObject({ code: 'wrong_state' })
    expect(mayDo('download', author, facts({ state: 'issued', hasPdf: false }))).toMatchObject({ code: 'wrong_state' })
  })

  it('is nothing that a rule throws on: it refuses', () => {
    expect(guarded(() => { throw new Error('broken') }).may).toBe(false)
    const broken = { ...facts(), project: undefined as unknown as RevisionFacts['project'] }
    expect(Object.values(abilities(author, broken)).some(ability => ability.may)).toBe(false)
  })
})

describe('an archived project', () => {
  it('is read and no longer worked on', () => {
    const project = { ...facts().project, archived: true }
    expect(seeProject(author, project).may).toBe(true)
    expect(workInProject(author, project)).toMatchObject({ may: false, code: 'wrong_state' })
    expect(editProject(manager, project).may).toBe(true)
    for (const what of ['edit', 'submit'] as const) expect(mayDo(what, author, facts({ project })).may).toBe(false)
  })
})

describe('an annotation', () => {
  const on = (over: Partial<AnnotationFacts> = {}, revision: Partial<RevisionFacts> = {}): AnnotationFacts =>
    ({ state: 'open', byId: 'checker', revision: facts({ state: 'for_checking', ...revision }), ...over })
  const allowed = (policy: typeof reply, annotation: AnnotationFacts) => Object.entries(everybody).filter(([, actor]) => policy(actor, annotation).may).map(([name]) => name)

  it('is answered by the project, closed and opened again by its checker', () => {
    expect(allowed(reply, on())).toEqual(['author', 'colleague', 'checker', 'otherChecker', 'manager'])
    expect(allowed(close, on())).toEqual(['checker'])
    expect(allowed(reopen, on({ state: 'closed' }))).toEqual(['checker'])
    expect(allowed(reply, on({ state: 'closed' }))).toEqual([])
    expect(allowed(close, on({}, { contributorIds: ['checker'] }))).toEqual([])
  })

  it('rests when the check is over', () => {
    for (const state of ['checked', 'issuing', 'issued', 'superseded', 'withdrawn'] as const) {
      for (const policy of [reply, close]) expect(allowed(policy, on({}, { state }))).toEqual([])
    }
  })
})
