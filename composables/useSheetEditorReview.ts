import type { SubmitReview } from '#shared/types/api'
import { refusalOf } from './useRevision'

/** The draft as the server would freeze it, computed there on request. */
export function useSubmitReview(revisionId: () => string) {
  const review = shallowRef<SubmitReview | null>(null)
  const failed = ref<string | null>(null)

  async function load() {
    review.value = null
    failed.value = null
    try {
      review.value = await $fetch<SubmitReview>(`/api/revisions/${revisionId()}/submit-review`)
    }
    catch (error) { failed.value = refusalOf(error).text }
  }

  return { review: shallowReadonly(review), failed: readonly(failed), load }
}
