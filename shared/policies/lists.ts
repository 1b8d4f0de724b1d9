import type { Ability } from '../types/api'
import { allOf, hasRole, isStaff, MAY, mayNot, type Actor } from './actor'
import { isManager } from './projects'

/** Who has which list. What stands in it is scoped to the person by the query. */

export const listProjects = (actor: Actor): Ability => allOf(() => (isStaff(actor) ? MAY : mayNot('Projects are the firm\'s own.')))
export const workList = (actor: Actor): Ability => allOf(() => (isStaff(actor) ? MAY : mayNot('This list is for those who write sheets.')))
export const checkList = (actor: Actor): Ability => allOf(() => (isStaff(actor) && hasRole(actor, 'checker') ? MAY : mayNot('This list is for checkers.')))
export const managersBoard = (actor: Actor): Ability => allOf(() => (isManager(actor) ? MAY : mayNot('The board is for managers.')))
export const issuedList = (actor: Actor): Ability =>
  allOf(() => (hasRole(actor, 'client') && actor.organisationId !== null ? MAY : mayNot('This list is for clients.')))
