import type { FetchError } from 'ofetch'
import type { RevisionView } from '#shared/types/api'

/** What the server refused, in words: `field` names the entry it belongs to, if one does. */
export interface Refusal { status: number, code: string, field: string | null, text: string }

interface ErrorBody { message?: string, data?: { code?: string, field?: string, help?: string } }

/** Reads a failed `$fetch`; without an answer of the server it says so. */
export function refusalOf(error: unknown): Refusal {
  const { data: body, statusCode } = error as FetchError<ErrorBody>
  return {
    status: statusCode ?? 0,
    code: body?.data?.code ?? 'no_answer',
    field: body?.data?.field ?? null,
    text: body?.data?.help ?? body?.message ?? 'The server did not answer. Nothing was changed; try again when you are connected.',
  }
}

/**
 * One revision as the server sees it, and what can be done to it. Every verb names the version that was on the screen,
 * so that nobody acts on a state that has moved meanwhile; after each, the revision is fetched again.
 */
export function useRevision(revisionId: string) {
  const path = `/api/revisions/${revisionId}`
  const { data, error, status, refresh } = useFetch<RevisionView>(path, { key: `revision-${revisionId}` })
  const refusal = computed(() => error.value ? refusalOf(error.value) : null)

  /**
   * Posts to `action` of this revision; rejects with the fetch error, after fetching what the revision is now.
   * Starting the next revision changes nothing on this one, so it names no version.
   */
  async function act<T = unknown>(action: string, body: Record<string, unknown> = {}): Promise<T> {
    const version = action === 'revise' ? {} : { version: data.value?.version }
    try {
      return await $fetch<unknown>(`${path}/${action}`, { method: 'POST', body: { ...version, ...body } }) as T
    }
    finally { await refresh() }
  }

  return { revision: data, refusal, status, refresh, act }
}
