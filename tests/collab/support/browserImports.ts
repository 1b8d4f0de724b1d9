/** What Nuxt imports by itself in composables, for the bundle of `browserPage.ts`. */
export { computed, onScopeDispose, readonly, ref, shallowReadonly, shallowRef, watch } from 'vue'
export { usePresence } from '../../../composables/usePresence'
export { useSheetConnection } from '../../../composables/useSheetConnection'
export { useUnsentEdits } from '../../../composables/useUnsentEdits'
