/** The checker's annotations on a draft that came back: read and answered while it is mended. */
import type { CheckState } from './useCheck'

export function useSheetAnnotations(revisionId: string) {
  const { data, refresh } = useFetch<CheckState>(`/api/revisions/${revisionId}/check`, { key: `check-${revisionId}`, server: false })
  const annotations = computed(() => data.value?.annotations ?? [])

  const post = async (path: string, body: object = {}) => {
    await $fetch<unknown>(path, { method: 'POST', body })
    await refresh()
  }
  return {
    annotations,
    refresh,
    reply: (id: string, text: string) => post(`/api/annotations/${id}/replies`, { text }),
    close: (id: string) => post(`/api/annotations/${id}/close`),
    reopen: (id: string) => post(`/api/annotations/${id}/reopen`),
  }
}
