import type { LocationQueryRaw } from 'vue-router'
import type { RevisionState } from '#shared/workflow/revision'

export interface ListSort { by: string, descending: boolean }

/**
 * What a list is narrowed to and sorted by, kept in the address: a link to it shows the same list,
 * and going back from a sheet finds it as it was left.
 */
export function useListQuery(initial: ListSort) {
  const route = useRoute()
  const router = useRouter()
  const text = (key: string) => typeof route.query[key] === 'string' ? route.query[key] : ''

  function set(changes: LocationQueryRaw) {
    const query = { ...route.query, ...changes }
    for (const key of Object.keys(changes)) if (!changes[key]) query[key] = undefined
    void router.replace({ query })
  }

  const search = computed({ get: () => text('q'), set: value => set({ q: value }) })
  const state = computed<RevisionState | ''>({ get: () => text('state') as RevisionState | '', set: value => set({ state: value }) })
  const person = computed({ get: () => text('person'), set: value => set({ person: value }) })
  const sort = computed<ListSort | null>({
    get() {
      const sorted = text('sort')
      if (!sorted) return initial
      return sorted.startsWith('-') ? { by: sorted.slice(1), descending: true } : { by: sorted, descending: false }
    },
    set: value => set({ sort: value ? `${value.descending ? '-' : ''}${value.by}` : '' }),
  })
  const clear = () => set({ q: '', state: '', person: '' })
  const narrowed = computed(() => Boolean(search.value || state.value || person.value))

  return { search, state, person, sort, clear, narrowed }
}
