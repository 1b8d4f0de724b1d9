/**
 * Whether a member reads or writes a draft. Who edits becomes a contributor and can neither check nor approve
 * it, so that a member who is none yet opens it for reading and says when that is to change.
 */
import type { RevisionView } from '#shared/types/api'

export type Reading = { may: true } | { may: false, why: string } | null

export function useSheetEditing(revision: () => RevisionView, userId: string) {
  const begun = useLocalStorage(`polewright-edit/${revision().id}/${userId}`, false)
  const contributes = computed(() => revision().contributors.some(one => one.id === userId))

  /** Null while writing; else whether writing can be begun. */
  const reading = computed<Reading>(() => {
    const { edit } = revision().abilities
    if (!edit.may) return { may: false, why: edit.why }
    return contributes.value || begun.value ? null : { may: true }
  })

  return { reading, edit: () => { begun.value = true } }
}
