import { linkRow, type RowLink } from './views/margin'
import type { RowState, SheetEditorHub } from '~/composables/useSheetEditorHub'

/** What the hub knows of the row of a block that is a component; `slot` is where its slips hang. */
export function useRowState(hub: SheetEditorHub, id: () => string, slot: Readonly<Ref<HTMLElement | null>>) {
  const state = shallowRef<RowState>(hub.row(id()))
  let link: RowLink | null = null
  onMounted(() => {
    if (!slot.value) return
    link = linkRow(hub, slot.value, (next) => { state.value = next })
    link.follow(id())
  })
  watch(id, next => link?.follow(next))
  onBeforeUnmount(() => link?.destroy())
  return shallowReadonly(state)
}
