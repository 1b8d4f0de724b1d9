import type { Role, SessionView } from '#shared/types/api'

/**
 * Who is signed in, as the server last said. It decides what the pages show; what may be done the server decides each time.
 */
export function useSession() {
  const session = useState<SessionView | null>('session', () => null)
  const known = useState('session-known', () => false)
  const request = useRequestFetch()

  /** Asks the server; a missing or ended session is simply nobody. */
  async function refresh(): Promise<SessionView | null> {
    session.value = await request<SessionView | null>('/api/auth/session').catch(() => null) ?? null
    known.value = true
    return session.value
  }

  /** After signing in: what the server answered is the session. */
  function enter(view: SessionView) {
    session.value = view
    known.value = true
  }

  async function signOut() {
    await $fetch('/api/auth/sign-out', { method: 'POST' })
    session.value = null
    await navigateTo('/sign-in')
  }

  const user = computed(() => session.value?.user ?? null)
  const has = (role: Role) => user.value?.roles.includes(role) ?? false

  return { session: readonly(session), user, known: readonly(known), has, refresh, enter, signOut }
}
