/** Results, cautions and the whereabouts of colleagues for the editor of one draft. */
import type { LiveSheet } from './useSheetDocument'
import type { RowPerson } from './useSheetEditorHub'
import { createSheetEditorHub } from './useSheetEditorHub'
import { responseRequests } from '#shared/document/lines'
import type { SheetDocument } from '#shared/document/types'
import type { SheetCaution } from '#shared/engine'

/** How often at most the cautions are computed, in milliseconds. */
const CAUTIONS_EVERY = 500

/** Colleagues by the row they are at. */
function byRow(people: LiveSheet['people']['value']): Map<string, RowPerson[]> {
  const rows = new Map<string, RowPerson[]>()
  for (const person of people) {
    if (person.line) rows.set(person.line, [...rows.get(person.line) ?? [], person])
  }
  return rows
}

export function useSheetEditorResults(live: LiveSheet) {
  const hub = createSheetEditorHub(source => engine.typeset(source))
  const engine = useEngine(results => hub.setResults(results))
  const document = shallowRef<SheetDocument | null>(null)
  const cautions = shallowRef<readonly SheetCaution[]>([])

  const warn = useThrottleFn(async () => {
    if (!document.value) return
    const blocks = responseRequests(document.value).map(({ blockId, request, supply, rating }) => ({ blockId, transfer: request.transfer, supply, rating }))
    const found = await engine.cautions(blocks).catch(() => [])
    if (found) cautions.value = found
  }, CAUTIONS_EVERY, true)

  watch(live.people, people => hub.setPeople(byRow(people)), { immediate: true })
  watch([engine.round, document], () => { void warn() })
  onBeforeUnmount(() => {
    engine.destroy()
    hub.destroy()
  })

  return { hub, engine, document, cautions, take: (next: SheetDocument) => { document.value = next } }
}
