import type { Actor } from '#shared/policies/actor'
import { actorOfSession } from './session'

/** The person whose session cookie came with an upgrade; null for nobody. A socket has no event of its own, only the request's headers. */
export async function actorOfHeaders(headers: Headers): Promise<Actor | null> {
  // Without a cookie that can be opened the library throws, since it cannot set one here.
  const session = await getUserSession({ headers, context: {} }).catch(() => null)
  const sid = session?.secure?.sid
  return typeof sid === 'string' ? actorOfSession(sid) : null
}
