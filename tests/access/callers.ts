import { Client } from '../helpers/client'
import { signedIn } from '../helpers/people'
import type { Caller, Rule } from './rule'
import type { World } from './world'

/** A fresh browser for the caller, so that signing out in one rule does not reach into the next. */
export async function clientOf(caller: Caller, rule: Pick<Rule, 'right' | 'wrong'>, world: World): Promise<Client> {
  switch (caller) {
    case 'nobody': return new Client()
    case 'client of another organisation': return signedIn(world.own.foreignClient)
    case 'engineer who is no member': return signedIn(world.own.outsider)
    case 'wrong role': return signedIn(rule.wrong(world))
    case 'right role': return signedIn(rule.right(world))
  }
}
