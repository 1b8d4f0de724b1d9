import type { Awareness } from 'y-protocols/awareness'
import type { WebsocketProvider } from 'y-websocket'
import { shallowReadonly, shallowRef, type Ref } from 'vue'
import type * as Y from 'yjs'
import { NOT_SAVED_AFTER } from '~~/shared/limits'
import type { Changed } from '~~/shared/collab/messages'
import { NO_CONNECTION, allCommitted, nothingWaits, savingState, type SavingState } from '~~/shared/collab/saving'
import { createSheetProvider } from './collab/sheetProvider'

export interface SheetConnection {
  provider: WebsocketProvider
  /** The word for the bar: Saved, Saving, Not saved yet, Offline … */
  state: Readonly<Ref<SavingState>>
  /** Everything in the document is committed at this moment. */
  isSaved: () => boolean
  /** The same, or it was so when the connection ended. */
  leftNothing: () => boolean
  setKept: (kept: boolean) => void
  connect: () => void
  stop: () => void
}

export interface SheetConnectionOptions {
  revisionId: string
  epoch: number
  ydoc: Y.Doc
  awareness: Awareness
  onChanged: (what: Changed['what']) => void
  /** Called each time everything is committed. */
  onSaved: () => void
}

const socketAddress = () => `${location.protocol === 'https:' ? 'wss' : 'ws'}://${location.host}/collaboration`

/** The live connection of one document and what may be said about it. Browser only. */
export function useSheetConnection(options: SheetConnectionOptions): SheetConnection {
  const state = shallowRef<SavingState>(savingState(NO_CONNECTION, Date.now()))
  let facts = NO_CONNECTION
  let overdue: ReturnType<typeof setTimeout> | undefined

  function show() {
    const next = savingState(facts, Date.now())
    if (next.kind !== state.value.kind || next.help !== state.value.help) state.value = next
  }

  const connection = createSheetProvider({
    server: socketAddress(),
    revisionId: options.revisionId,
    epoch: options.epoch,
    ydoc: options.ydoc,
    awareness: options.awareness,
    Socket: WebSocket,
    onChanged: options.onChanged,
    onFacts: (next) => {
      const began = next.waitingSince !== facts.waitingSince
      const saved = allCommitted(next) && (next.upTo !== facts.upTo || !allCommitted(facts))
      facts = next
      if (began) {
        clearTimeout(overdue)
        if (next.waitingSince !== null) overdue = setTimeout(show, NOT_SAVED_AFTER + 20)
      }
      show()
      if (saved) options.onSaved()
    },
  })

  /** The network is back: no need to wait for the next attempt. */
  const online = () => {
    if (facts.closed === null) connection.connect()
  }
  window.addEventListener('online', online)

  return {
    provider: connection.provider,
    state: shallowReadonly(state),
    isSaved: () => allCommitted(facts),
    leftNothing: () => nothingWaits(facts),
    setKept: connection.setKept,
    connect: connection.connect,
    stop: () => {
      window.removeEventListener('online', online)
      clearTimeout(overdue)
      connection.destroy()
    },
  }
}
