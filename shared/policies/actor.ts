import type { Ability, Role } from '../types/api'

/** Who asks: a person signed in on one device. */
export interface Actor {
  id: string
  name: string
  initials: string
  roles: readonly Role[]
  /** The client organisation of a client's person; null for the firm's own people. */
  organisationId: string | null
  sessionId: string
}

export const MAY: Ability = { may: true }

/** `wrong_state`: it is not a matter of rights; someone else may have been first, or something is still missing. */
export const mayNot = (why: string, code: 'not_allowed' | 'wrong_state' = 'not_allowed'): Ability => ({ may: false, why, code })

export const hasRole = (actor: Actor, ...roles: Role[]): boolean => roles.some(role => actor.roles.includes(role))

/** One of the firm's own people, whatever their role. A client's person is never one. */
export const isStaff = (actor: Actor): boolean => actor.organisationId === null && hasRole(actor, 'engineer', 'checker', 'manager')

/** The first refusal among `rules`, else permission. A rule that throws refuses. */
export function allOf(...rules: (() => Ability)[]): Ability {
  for (const rule of rules) {
    const ability = guarded(rule)
    if (!ability.may) return ability
  }
  return MAY
}

/** Deny by default, also when a rule fails. */
export function guarded(rule: () => Ability): Ability {
  try { return rule() }
  catch { return mayNot('Your right to this could not be established.') }
}
