import type { Ability } from '../types/api'
import { hasRole, isStaff, MAY, mayNot } from './actor'
import type { Actor } from './actor'

/** People, clients and what they may do are kept by the firm's managers. */
export function mayManagePeople(actor: Actor): Ability {
  return isStaff(actor) && hasRole(actor, 'manager') ? MAY : mayNot('Only a manager keeps people and clients.')
}
