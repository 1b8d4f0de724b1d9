/** The copy of a document that this device keeps, in IndexedDB, one for each revision, freeze and person. */
import { IndexeddbPersistence, clearDocument } from 'y-indexeddb'
import * as Y from 'yjs'
import { storeEpoch, storeName } from '~~/shared/collab/unsent'

const CONFIRMED = 'confirmed'
const AUTHORS = 'authors'

/** Whether this browser lets the page keep anything: a private window may refuse. */
export async function canKeep(): Promise<boolean> {
  if (typeof indexedDB === 'undefined') return false
  return new Promise((resolve) => {
    try {
      const request = indexedDB.open('polewright')
      request.onsuccess = () => {
        request.result.close()
        resolve(true)
      }
      request.onerror = () => resolve(false)
      request.onblocked = () => resolve(false)
    }
    catch {
      resolve(false)
    }
  })
}

export interface KeptCopy {
  /** Resolves when what was kept is in the document; true if anything was. */
  whenRead: Promise<boolean>
  /** The state that the server had confirmed last; null before the first time. */
  confirmed: () => Promise<Y.Snapshot | null>
  /** Yjs client ids under which this person wrote in this copy. */
  authors: () => Promise<Set<number>>
  /** Notes that all that is in the document now is confirmed. */
  confirm: () => Promise<void>
  close: () => Promise<void>
}

/** Pages that have a copy open hold its lock together; whoever removes it needs it alone. Without locks (plain http) there is none. */
function holdLock(name: string): () => void {
  let release = () => {}
  const released = new Promise<void>(resolve => release = resolve)
  void navigator.locks?.request(name, { mode: 'shared' }, () => released)
  return release
}

/**
 * Removes a kept copy from this device.
 * @param whenFree waits until no page has it open; else it is left where it is, since that page may yet write into it
 */
export async function removeCopy(revisionId: string, epoch: number, userId: string, whenFree: boolean): Promise<void> {
  const name = storeName(revisionId, epoch, userId)
  if (!navigator.locks) return clearDocument(name)
  await navigator.locks.request(name, whenFree ? {} : { ifAvailable: true }, async (lock) => {
    if (lock) await clearDocument(name)
  })
}

/** Client ids are kept as one text, `12,34`. */
const toIds = (value: unknown) => new Set(typeof value === 'string' && value !== '' ? value.split(',').map(Number) : [])

/**
 * Opens the kept copy and lets `ydoc` be written into it from now on.
 * @param writing whether `ydoc` is about to be edited, so that its client id is this person's
 */
export function keepCopy(ydoc: Y.Doc, revisionId: string, epoch: number, userId: string, writing: boolean): KeptCopy {
  const name = storeName(revisionId, epoch, userId)
  const release = holdLock(name)
  const store = new IndexeddbPersistence(name, ydoc)

  const readAuthors = async () => toIds(await store.get(AUTHORS))
  const whenRead = store.whenSynced.then(async () => {
    const kept = ydoc.store.clients.size > 0
    if (writing) {
      const authors = await readAuthors()
      await store.set(AUTHORS, [...authors.add(ydoc.clientID)].join(','))
    }
    return kept
  })

  return {
    whenRead,
    authors: readAuthors,
    confirmed: async () => {
      const bytes: unknown = await store.get(CONFIRMED)
      return bytes instanceof ArrayBuffer ? Y.decodeSnapshot(new Uint8Array(bytes)) : null
    },
    confirm: async () => {
      await store.set(CONFIRMED, new Uint8Array(Y.encodeSnapshot(Y.snapshot(ydoc))).buffer)
    },
    close: () => store.destroy().then(release),
  }
}

/** Freezes of this revision, below `epoch`, of which this device still keeps this person's copy. */
export async function keptEpochs(revisionId: string, epoch: number, userId: string): Promise<number[]> {
  if (typeof indexedDB === 'undefined' || typeof indexedDB.databases !== 'function') return []
  const databases = await indexedDB.databases().catch(() => [])
  return databases
    .map(({ name }) => name ? storeEpoch(name, revisionId, userId) : null)
    .filter((kept): kept is number => kept !== null && kept < epoch)
    .sort((a, b) => a - b)
}
