import type { Ability } from '../types/api'
import { allOf, hasRole, isStaff, MAY, mayNot, type Actor } from './actor'

/** What decides about a project. */
export interface ProjectFacts {
  memberIds: readonly string[]
  /** Managers who may approve and issue its sheets. */
  managerIds: readonly string[]
  clientId: string | null
  archived: boolean
}

const NO_SUCH = 'There is no such project here, or you are not a member of it.'

/** Member, or manager authorised for it. */
export const isMember = (actor: Actor, project: ProjectFacts): boolean =>
  isStaff(actor) && (project.memberIds.includes(actor.id) || project.managerIds.includes(actor.id))

export const isManager = (actor: Actor): boolean => isStaff(actor) && hasRole(actor, 'manager')

export const seeProject = (actor: Actor, project: ProjectFacts): Ability =>
  allOf(() => (isManager(actor) || isMember(actor, project) ? MAY : mayNot(NO_SUCH)))

export const createProject = (actor: Actor): Ability =>
  allOf(() => (isManager(actor) ? MAY : mayNot('Only a manager sets up projects.')))

export const editProject = (actor: Actor, project: ProjectFacts): Ability => allOf(
  () => seeProject(actor, project),
  () => (isManager(actor) ? MAY : mayNot('Only a manager changes a project.')),
)

/** Sheets, references and pictures of a project: its members. */
export const workInProject = (actor: Actor, project: ProjectFacts): Ability => allOf(
  () => seeProject(actor, project),
  () => (isMember(actor, project) ? MAY : mayNot('Only members of the project do this. A manager can add you to it.')),
  () => (project.archived ? mayNot('The project is archived. A manager can open it again.', 'wrong_state') : MAY),
)
