/** The connection of one document: y-websocket's own provider, and the count of what the server has committed. */
import { WebsocketProvider } from 'y-websocket'
import type { Awareness } from 'y-protocols/awareness'
import type * as Y from 'yjs'
import { DOCUMENT_FORMAT } from '~~/shared/document/types'
import { CLOSE, MESSAGE_CHANGED, MESSAGE_DONE, MESSAGE_REFUSED, changedSchema, doneSchema, readOwnMessage, refusedSchema, type Changed } from '~~/shared/collab/messages'
import { NO_CONNECTION, allCommitted, type ConnectionFacts } from '~~/shared/collab/saving'
import { countingSocket } from './countingSocket'

export interface SheetProviderOptions {
  /** `wss://host/collaboration` */
  server: string
  revisionId: string
  epoch: number
  ydoc: Y.Doc
  awareness: Awareness
  /** The class of socket; the browser's own unless a test brings another. */
  Socket: typeof WebSocket
  onFacts: (facts: ConnectionFacts) => void
  onChanged: (what: Changed['what']) => void
}

export interface SheetProvider {
  provider: WebsocketProvider
  facts: () => ConnectionFacts
  /** Adds what only the page knows: whether this device keeps a copy. */
  setKept: (kept: boolean) => void
  connect: () => void
  destroy: () => void
}

/** Longest pause between two attempts; spread, so that all pages do not come at once after a restart. */
const longestPause = () => 2500 + Math.random() * 2500

const stopsForGood = (event: CloseEvent) => (event.code >= 4400 && event.code < 4500) || event.code === CLOSE.tooLarge

/** Makes the provider of one document. It connects when told to, so that the kept copy can be read first. */
export function createSheetProvider(options: SheetProviderOptions): SheetProvider {
  let facts: ConnectionFacts = { ...NO_CONNECTION }

  function update(change: Partial<ConnectionFacts>) {
    const next = { ...facts, ...change }
    const waits = next.connected && !allCommitted(next)
    facts = { ...next, waitingSince: waits ? facts.waitingSince ?? Date.now() : null }
    options.onFacts(facts)
  }

  const provider = new WebsocketProvider(options.server, options.revisionId, options.ydoc, {
    connect: false,
    awareness: options.awareness,
    params: { epoch: String(options.epoch), format: String(DOCUMENT_FORMAT) },
    WebSocketPolyfill: countingSocket(options.Socket, {
      opened: () => update({ sent: 0, upTo: 0, answer: null, editedSince: false, refused: null, closed: null }),
      frame: (sent, answer) => update(answer ? { sent, answer: sent } : { sent }),
    }),
    maxBackoffTime: longestPause(),
    disableBc: true,
    shouldReconnect: event => !stopsForGood(event),
  })

  const onEdit = (_bytes: Uint8Array, origin: unknown) => {
    if (origin !== provider && !facts.connected && !facts.editedSince) update({ editedSince: true })
  }
  options.ydoc.on('update', onEdit)
  listen(provider, options, update, () => facts)
  return {
    provider,
    facts: () => facts,
    setKept: kept => update({ kept }),
    connect: () => provider.connect(),
    destroy: () => {
      options.ydoc.off('update', onEdit)
      provider.destroy()
    },
  }
}

function listen(
  provider: WebsocketProvider,
  options: SheetProviderOptions,
  update: (change: Partial<ConnectionFacts>) => void,
  facts: () => ConnectionFacts,
) {
  provider.on('status', ({ status }) => update(status === 'connected' ? { connected: true } : { connected: false }))
  provider.on('sync', synced => update({ synced }))
  provider.on('connection-close', () => update({ connected: false, synced: false, lost: true }))
  provider.on('closed', ({ code }) => update({ closed: code }))

  provider.messageHandlers[MESSAGE_DONE] = (_encoder, decoder) => {
    const done = readOwnMessage(decoder, doneSchema)
    if (done) update({ upTo: Math.max(done.upTo, facts().upTo) })
  }
  provider.messageHandlers[MESSAGE_REFUSED] = (_encoder, decoder) => {
    const refused = readOwnMessage(decoder, refusedSchema)
    if (refused) update({ refused })
  }
  provider.messageHandlers[MESSAGE_CHANGED] = (_encoder, decoder) => {
    const changed = readOwnMessage(decoder, changedSchema)
    if (changed) options.onChanged(changed.what)
  }
}
