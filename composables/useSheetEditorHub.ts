/**
 * What the rows of the editor show beside what is typed: results, who is there, annotations.
 * A row is plain DOM and hears only of changes of its own id, so that a keystroke in a sheet of
 * 500 blocks touches the rows whose figures moved and no others.
 */
import type { AnnotationView, PersonRef } from '#shared/types/api'
import type { LineResult } from '#shared/engine/types'

/** A colleague at a row, with the colour in which the caret is drawn. */
export interface RowPerson extends PersonRef { colour: string }

export interface RowState {
  result: LineResult | null
  /** n of "Req n", in reading order. */
  requirement: number | null
  people: readonly RowPerson[]
  annotations: readonly AnnotationView[]
  /** The reader's own caret is in this row. */
  here: boolean
}

export interface SheetEditorHub {
  row: (id: string) => RowState
  /** Calls `refresh` when what the row shows has changed, until the returned function is called. */
  subscribe: (id: string, refresh: () => void) => () => void
  setResults: (results: readonly LineResult[]) => void
  setPeople: (people: ReadonlyMap<string, readonly RowPerson[]>) => void
  setAnnotations: (annotations: ReadonlyMap<string, readonly AnnotationView[]>) => void
  /** The row with the reader's own caret. */
  standAt: (id: string | null) => void
  /** Calls `show` whenever the element comes near the screen. */
  observe: (element: HTMLElement, show: () => void) => () => void
  /** Where a row lets slips hang, by the row's id. */
  slots: Map<string, HTMLElement>
  results: Readonly<Ref<readonly LineResult[]>>
  /** LaTeX of an expression, or null while it cannot be read. */
  typeset: (source: string) => Promise<string | null>
  /** Whether the reader may write; rows hide their controls otherwise. */
  editable: Ref<boolean>
  destroy: () => void
}

const NOBODY: readonly never[] = []
/** Subscribed to under this word: the set of names that the sheet defines. No row has it for an id. */
export const NAMES = '*names'

/** Numbers of the requirement lines by id, in reading order, from 1. */
export function numberRequirements(results: readonly LineResult[]): Map<string, number> {
  const ids = results.filter(result => result.kind === 'requirement').map(result => result.id)
  return new Map(ids.map((id, index) => [id, index + 1]))
}

/** Ids whose value differs between two maps; an absent and an empty list are the same. */
export function changedKeys<Value>(before: ReadonlyMap<string, Value>, after: ReadonlyMap<string, Value>, same: (a: Value | undefined, b: Value | undefined) => boolean): string[] {
  return [...new Set([...before.keys(), ...after.keys()])].filter(id => !same(before.get(id), after.get(id)))
}

/** Elements that wait for the screen; one observer for all rows. */
function createVisibility() {
  const waiting = new Map<Element, () => void>()
  const observer = typeof IntersectionObserver === 'undefined'
    ? null
    : new IntersectionObserver((entries) => {
        for (const entry of entries) if (entry.isIntersecting) waiting.get(entry.target)?.()
      }, { rootMargin: '700px 0px' })
  return {
    observe(element: HTMLElement, show: () => void) {
      if (!observer) show()
      if (!observer) return () => {}
      waiting.set(element, show)
      observer.observe(element)
      return () => {
        waiting.delete(element)
        observer.unobserve(element)
      }
    },
    destroy: () => observer?.disconnect(),
  }
}

export function createSheetEditorHub(typeset: SheetEditorHub['typeset']): SheetEditorHub {
  const listeners = new Map<string, Set<() => void>>()
  const visibility = createVisibility()
  const results = shallowRef<readonly LineResult[]>([])
  const slots = shallowReactive(new Map<string, HTMLElement>())
  let byId = new Map<string, LineResult>()
  let numbers = new Map<string, number>()
  let names = ''
  let people: ReadonlyMap<string, readonly RowPerson[]> = new Map()
  let annotations: ReadonlyMap<string, readonly AnnotationView[]> = new Map()

  let standing: string | null = null

  const tell = (ids: Iterable<string>) => {
    for (const id of new Set(ids)) listeners.get(id)?.forEach(refresh => refresh())
  }
  const identical = (a: unknown, b: unknown) => a === b
  const alike = (a: unknown, b: unknown) => a === b || JSON.stringify(a ?? []) === JSON.stringify(b ?? [])

  return {
    row: id => ({
      result: byId.get(id) ?? null,
      requirement: numbers.get(id) ?? null,
      people: people.get(id) ?? NOBODY,
      annotations: annotations.get(id) ?? NOBODY,
      here: id !== '' && id === standing,
    }),
    subscribe(id, refresh) {
      const set = listeners.get(id) ?? new Set()
      listeners.set(id, set.add(refresh))
      return () => {
        set.delete(refresh)
        if (set.size === 0 && listeners.get(id) === set) listeners.delete(id)
      }
    },
    setResults(next) {
      const map = new Map(next.map(result => [result.id, result]))
      const nextNumbers = numberRequirements(next)
      const changed = [...changedKeys(byId, map, identical), ...changedKeys(numbers, nextNumbers, identical)]
      byId = map
      numbers = nextNumbers
      results.value = next
      const nextNames = next.map(result => result.defines ?? '').join(' ')
      tell(nextNames === names ? changed : [...changed, NAMES])
      names = nextNames
    },
    setPeople(next) {
      const changed = changedKeys(people, next, alike)
      people = next
      tell(changed)
    },
    setAnnotations(next) {
      const changed = changedKeys(annotations, next, alike)
      annotations = next
      tell(changed)
    },
    standAt(id) {
      if (id === standing) return
      const both = [standing, id].filter(one => one !== null)
      standing = id
      tell(both)
    },
    observe: visibility.observe,
    slots,
    results,
    typeset,
    editable: ref(true),
    destroy: visibility.destroy,
  }
}
