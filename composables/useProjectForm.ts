import type { PersonView, OrganisationView } from '#shared/types/people'

/** What a project's forms choose from: the firm's active people by role, and its clients. */
export async function useProjectForm() {
  const [{ data: people }, { data: organisations, refresh: refreshOrganisations }] = await Promise.all([
    useFetch<PersonView[]>('/api/people', { key: 'people' }),
    useFetch<OrganisationView[]>('/api/organisations', { key: 'organisations' }),
  ])
  const staff = computed(() => (people.value ?? []).filter(one => one.state !== 'disabled' && !one.roles.includes('client')))
  const writers = computed(() => staff.value.filter(one => one.roles.some(role => role === 'engineer' || role === 'checker')))
  const managers = computed(() => staff.value.filter(one => one.roles.includes('manager')))
  const clients = computed(() => (organisations.value ?? []).map(({ id, name }) => ({ value: id, label: name })))

  return { writers, managers, clients, refreshOrganisations }
}

export const SCHEME_OPTIONS = [
  { value: 'letters', label: 'P1, P2 … before construction, then A, B, C …' },
  { value: 'numbers', label: '0, 1, 2 …' },
] as const
export const LEVEL_OPTIONS = [
  { value: 1, label: '1 · within the team' },
  { value: 2, label: '2 · independent in the firm' },
  { value: 3, label: '3 · with a full alternative calculation' },
] as const
