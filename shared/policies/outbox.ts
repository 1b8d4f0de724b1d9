import type { Ability } from '../types/api'
import { hasRole, isStaff, MAY, mayNot } from './actor'
import type { Actor } from './actor'

/** The demonstration's outbox holds what was written to everybody, so it is for the firm's own people. */
export function mayReadOutbox(actor: Actor): Ability {
  return isStaff(actor) ? MAY : mayNot('The outbox is for the firm’s own people.')
}

/** A link that opens an account is for whoever keeps the accounts: nobody else may borrow a colleague's. */
export const mayFollowAccountLinks = (actor: Actor): Ability =>
  isStaff(actor) && hasRole(actor, 'manager') ? MAY : mayNot('Only a manager sees links that open accounts.')
