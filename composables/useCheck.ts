import type { AnnotationKind, AnnotationView, RevisionView, SubmissionView, TickView } from '#shared/types/api'

export interface CheckState {
  ticks: TickView[]
  annotations: AnnotationView[]
  progress: { ticked: number, lines: number, openMustChange: number }
}

/** What an annotation hangs on; `from` and `to` are offsets in the row's text as typed, null for the whole row. */
export interface AnnotationTarget { blockId: string | null, quote: string, from: number | null, to: number | null }

export interface NewAnnotation extends AnnotationTarget { kind: AnnotationKind, text: string }

/** What still stands between the checker and the signature, in words; null when nothing does. */
export function missingForSignature(progress: CheckState['progress']): string | null {
  const open = progress.lines - progress.ticked
  const parts = [
    open > 0 ? `${open} ${open === 1 ? 'line' : 'lines'} to tick` : '',
    progress.openMustChange > 0 ? `${progress.openMustChange} “must change” open` : '',
  ].filter(Boolean)
  return parts.length > 0 ? parts.join(' · ') : null
}

/** Numbered annotations by the row they hang on; those without a row of this sheet stand under `null`. */
export function annotationsByRow(annotations: readonly AnnotationView[], rows: ReadonlySet<string>): Map<string | null, AnnotationView[]> {
  const map = new Map<string | null, AnnotationView[]>()
  for (const annotation of annotations) {
    const id = annotation.anchor.blockId
    const row = id !== null && rows.has(id) ? id : null
    map.set(row, [...map.get(row) ?? [], annotation])
  }
  return map
}

/**
 * The frozen sheet and its check: ticks, annotations, answers. Ticks show at once and are taken back when the server refuses them.
 * Fetched again whenever `refresh` is called; `submission` stays the same as long as its id does.
 */
export function useCheck(revision: Ref<RevisionView | null | undefined>, revisionId: string, personId: () => string | null) {
  const base = `/api/revisions/${revisionId}`
  const submissionQuery = useFetch<SubmissionView>(`${base}/submission`, { key: `submission-${revisionId}` })
  const checkQuery = useFetch<CheckState>(`${base}/check`, { key: `check-${revisionId}` })
  const submission = submissionQuery.data
  const check = checkQuery.data

  const pending = ref<ReadonlyMap<string, boolean>>(new Map())
  const mine = computed(() => {
    const set = new Set(check.value?.ticks.filter(tick => tick.by.id === personId()).map(tick => tick.lineId))
    for (const [lineId, on] of pending.value) {
      if (on) set.add(lineId)
      else set.delete(lineId)
    }
    return set
  })
  const others = computed(() => {
    const map = new Map<string, TickView[]>()
    for (const tick of check.value?.ticks ?? []) {
      if (tick.by.id !== personId()) map.set(tick.lineId, [...map.get(tick.lineId) ?? [], tick])
    }
    return map
  })
  const rows = computed(() => new Set(submission.value?.lines.map(line => line.lineId)))
  const annotations = computed(() => check.value?.annotations ?? [])

  const wait = (lineId: string, on: boolean | null) => {
    const next = new Map(pending.value)
    if (on === null) next.delete(lineId)
    else next.set(lineId, on)
    pending.value = next
  }

  async function refresh() {
    await checkQuery.refresh()
    if (revision.value?.submissionId !== submission.value?.id) await submissionQuery.refresh()
  }

  /** Sets or takes away one's own tick; rejects with the server's refusal. */
  async function tick(lineId: string, on: boolean) {
    wait(lineId, on)
    try {
      await $fetch<unknown>(`${base}/ticks/${encodeURIComponent(lineId)}`, { method: on ? 'PUT' : 'DELETE' })
      await checkQuery.refresh()
    }
    finally { wait(lineId, null) }
  }

  const post = async (path: string, body: object = {}) => {
    await $fetch<unknown>(path, { method: 'POST', body })
    await checkQuery.refresh()
  }
  const annotate = (annotation: NewAnnotation) => post(`${base}/annotations`, annotation)
  const reply = (id: string, text: string) => post(`/api/annotations/${id}/replies`, { text })
  const close = (id: string) => post(`/api/annotations/${id}/close`)
  const reopen = (id: string) => post(`/api/annotations/${id}/reopen`)

  return {
    submission, submissionError: submissionQuery.error, check, checkError: checkQuery.error,
    mine, others, rows, annotations, progress: computed(() => check.value?.progress ?? null),
    refresh, tick, annotate, reply, close, reopen,
    ready: Promise.all([submissionQuery, checkQuery]),
  }
}
