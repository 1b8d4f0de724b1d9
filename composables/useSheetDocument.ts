import { Awareness } from 'y-protocols/awareness'
import type { WebsocketProvider } from 'y-websocket'
import * as Y from 'yjs'
import { createEventHook, useThrottleFn } from '@vueuse/core'
import { computed, onScopeDispose, readonly, ref, shallowRef, watch, type Ref } from 'vue'
import { SHEET_FRAGMENT, type Changed } from '~~/shared/collab/messages'
import type { PresentPerson } from '~~/shared/collab/presence'
import type { SavingState } from '~~/shared/collab/saving'
import { unsentEdits, type UnsentEdits } from '~~/shared/collab/unsent'
import { usePresence } from './usePresence'
import { useSheetConnection } from './useSheetConnection'
import { useUnsentEdits } from './useUnsentEdits'
import { canKeep, keepCopy, type KeptCopy } from './collab/keptCopy'

/** How often at most the confirmed state is noted on this device, in milliseconds. */
const NOTE_EVERY = 1000

/** A draft as several people edit it: the document, who is in it, and what is saved. */
export interface LiveSheet {
  ydoc: Y.Doc
  /** Name of the fragment for the editor's collaboration extension. */
  fragment: typeof SHEET_FRAGMENT
  /** For the caret extension, which reads its `awareness`. */
  provider: WebsocketProvider
  awareness: Awareness
  /** The document is there, from this device or from the server: the editor may be shown. */
  ready: Readonly<Ref<boolean>>
  state: Readonly<Ref<SavingState>>
  people: Readonly<Ref<readonly PresentPerson[]>>
  standAt: (line: string | null) => void
  /** Edits of an earlier epoch (or, once a freeze has closed this one, of it) that are not in the submission. */
  unsent: Readonly<Ref<UnsentEdits | null>>
  /** Puts the unsent edits of earlier epochs into this draft, as new edits. */
  putBackUnsent: () => Promise<void>
  discardUnsent: () => Promise<void>
  /** The server says that something changed: `state`, `check` (ticks, annotations) or `document`. Fetch it again. */
  onChanged: (listener: (what: Changed['what']) => void) => void
  destroy: () => void
}

/**
 * Opens the draft of a revision for live editing. Browser only; call it in the set-up of a client component
 * (it ends with its scope) and make a new one when `epoch` changes.
 * @param revision id and epoch, as the revision's view gives them
 * @param userId who is signed in: another person's kept copy is never opened
 */
export function useSheetDocument(revision: { id: string, epoch: number }, userId: string): LiveSheet {
  const ydoc = new Y.Doc()
  const awareness = new Awareness(ydoc)
  const changed = createEventHook<Changed['what']>()
  const ready = ref(false)
  const left = shallowRef<UnsentEdits | null>(null)
  const earlier = useUnsentEdits(revision.id, revision.epoch, userId)
  let copy: KeptCopy | null = null
  let arrived = false
  let ended = false

  const note = useThrottleFn(() => {
    if (!ended && connection.isSaved()) return copy?.confirm()
  }, NOTE_EVERY, true)

  const connection = useSheetConnection({
    revisionId: revision.id,
    epoch: revision.epoch,
    ydoc,
    awareness,
    onChanged: what => void changed.trigger(what),
    onSaved: () => {
      // What an earlier epoch left behind shows against what the server holds, so not before that is here.
      if (!arrived) void earlier.look(ydoc)
      arrived = true
      ready.value = true
      void note()
    },
  })
  const presence = usePresence(awareness, userId)

  /** A freeze found edits on their way: they are shown, and stay on this device under this epoch. */
  async function lookAtFreeze() {
    const edits = unsentEdits(ydoc, await copy?.confirmed() ?? null, new Set([ydoc.clientID]))
    left.value = edits.blocks.length > 0 || edits.removals > 0 ? { epoch: revision.epoch, ...edits } : null
  }
  const stopWatching = watch(connection.state, (state) => {
    if (state.kind !== 'frozen') return
    if (connection.leftNothing()) void copy?.confirm()
    else void lookAtFreeze()
  })

  async function open() {
    if (await canKeep() && !ended) {
      copy = keepCopy(ydoc, revision.id, revision.epoch, userId, true)
      const wasKept = await copy.whenRead
      connection.setKept(true)
      if (wasKept) ready.value = true
    }
    if (ended) return
    connection.connect()
  }
  void open()

  function destroy() {
    if (ended) return
    ended = true
    stopWatching()
    if (connection.leftNothing()) void copy?.confirm()
    presence.stop()
    connection.stop()
    awareness.destroy()
    void copy?.close()
    ydoc.destroy()
  }
  onScopeDispose(destroy)

  return {
    ydoc,
    fragment: SHEET_FRAGMENT,
    provider: connection.provider,
    awareness,
    ready: readonly(ready),
    state: connection.state,
    people: presence.people,
    standAt: presence.standAt,
    unsent: computed(() => left.value ?? earlier.unsent.value),
    putBackUnsent: () => earlier.putBack(ydoc),
    discardUnsent: () => earlier.discard(),
    onChanged: listener => void changed.on(listener),
    destroy,
  }
}
