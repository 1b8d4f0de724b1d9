/** From a policy's answer to the request's: nothing when it may, else the refusal with the policy's own words. */
import type { Ability } from '#shared/types/api'
import { conflict, notAllowed, notFound } from './errors'

export function authorise(ability: Ability): void {
  if (ability.may) return
  throw ability.code === 'wrong_state' ? conflict('wrong_state', ability.why) : notAllowed(ability.why)
}

/** For what may not even be seen: the same answer as for what is not there. */
export function authoriseSight(ability: Ability): void {
  if (!ability.may) throw notFound()
}
