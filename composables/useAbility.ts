import type { Role } from '#shared/types/api'

export interface Place { to: string, label: string }

const PLACES: readonly (Place & { roles: readonly Role[] })[] = [
  { to: '/work', label: 'My sheets', roles: ['engineer'] },
  { to: '/queue', label: 'To check', roles: ['checker'] },
  { to: '/board', label: 'Board', roles: ['manager'] },
  { to: '/projects', label: 'Projects', roles: ['engineer', 'checker', 'manager'] },
  { to: '/people', label: 'People', roles: ['manager'] },
  { to: '/organisations', label: 'Clients', roles: ['manager'] },
  { to: '/issued', label: 'Issued sheets', roles: ['client'] },
]

/** Pages for which any firm role will do. */
const STAFF_PAGES = ['/projects', '/sheets']

const under = (path: string, place: string) => path === place || path.startsWith(`${place}/`)

/** Whether someone with these roles has a use for the page at `path`. Pages that belong to nobody in particular are open to all who are signed in. */
export function mayVisit(path: string, roles: readonly Role[]): boolean {
  if (under(path, '/projects/new')) return roles.includes('manager')
  if (STAFF_PAGES.some(page => under(path, page))) return roles.some(role => role !== 'client')
  const place = PLACES.find(one => under(path, one.to))
  return !place || place.roles.some(role => roles.includes(role))
}

/** The places of the bar for whoever is signed in. */
export function useAbility() {
  const { user, has } = useSession()
  const places = computed<Place[]>(() => PLACES.filter(place => place.roles.some(has)))
  const isStaff = computed(() => user.value?.roles.some(role => role !== 'client') ?? false)

  return { places, isStaff, has }
}
