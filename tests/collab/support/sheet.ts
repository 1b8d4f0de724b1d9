/** A page as the server sees it: the product's own provider over a real socket, signed in with a real session. */
import { WebSocket as NodeSocket } from 'ws'
import { inject } from 'vitest'
import { Awareness } from 'y-protocols/awareness'
import * as Y from 'yjs'
import { createSheetProvider, type SheetProvider } from '../../../composables/collab/sheetProvider'
import { SHEET_FRAGMENT, type Changed } from '../../../shared/collab/messages'
import { allCommitted, savingState, type ConnectionFacts, type SavingState } from '../../../shared/collab/saving'
import { openSessionFor, SESSION_COOKIE, type Person } from '../../helpers/people'
import type { Draft } from './drafts'

export interface Watcher<T> { read: () => T, wait: (holds: (value: T) => boolean, what: string) => Promise<T>, changed: () => void }

/** Waits for a change that makes something true; the limit only ends a test that has failed anyway. */
export function watcher<T>(read: () => T, limit = 25_000): Watcher<T> {
  const waiting = new Set<() => void>()
  return {
    read,
    changed: () => [...waiting].forEach(look => look()),
    wait: (holds, what) => new Promise((resolve, reject) => {
      const timer = setTimeout(() => {
        waiting.delete(look)
        reject(new Error(`Never happened: ${what}. Last: ${JSON.stringify(read())}`))
      }, limit)
      const look = () => {
        if (!holds(read())) return
        clearTimeout(timer)
        waiting.delete(look)
        resolve(read())
      }
      waiting.add(look)
      look()
    }),
  }
}

const signedSocket = (cookie: string, origin: string) => class extends NodeSocket {
  constructor(url: string | URL, protocols?: string | string[]) {
    super(url, protocols, { headers: { cookie, origin } })
  }
} as unknown as typeof WebSocket

export interface OpenOptions {
  base?: string
  epoch?: number
  ydoc?: Y.Doc
  /** Does not connect until told to. */
  offline?: boolean
  cookie?: string
}

export class Page {
  readonly ydoc: Y.Doc
  readonly awareness: Awareness
  readonly sheet: SheetProvider
  readonly facts: Watcher<ConnectionFacts>
  readonly text = watcher(() => this.plain())
  readonly heard: Changed['what'][] = []
  readonly changes = watcher(() => this.heard.length)
  readonly present = watcher(() => [...this.awareness.getStates().values()] as { user?: { id: string, name: string } }[])

  constructor(readonly person: Person, draft: Pick<Draft, 'revisionId' | 'epoch'>, cookie: string, options: OpenOptions) {
    const base = options.base ?? inject('base').url
    this.ydoc = options.ydoc ?? new Y.Doc()
    this.awareness = new Awareness(this.ydoc)
    this.sheet = createSheetProvider({
      server: `${base.replace(/^http/, 'ws')}/collaboration`,
      revisionId: draft.revisionId,
      epoch: options.epoch ?? draft.epoch,
      ydoc: this.ydoc,
      awareness: this.awareness,
      Socket: signedSocket(cookie, base),
      onFacts: () => this.facts?.changed(),
      onChanged: (what) => {
        this.heard.push(what)
        this.changes.changed()
      },
    })
    this.facts = watcher(() => this.sheet.facts())
    this.ydoc.on('update', () => this.text.changed())
    this.awareness.on('change', () => this.present.changed())
    if (!options.offline) this.sheet.connect()
  }

  get fragment() { return this.ydoc.getXmlFragment(SHEET_FRAGMENT) }

  plain(): string {
    return this.fragment.toString()
  }

  state(): SavingState {
    return savingState(this.sheet.facts(), Date.now())
  }

  saved(): Promise<ConnectionFacts> {
    return this.facts.wait(allCommitted, `${this.person.name}'s edits are committed`)
  }

  shows(text: string): Promise<string> {
    return this.text.wait(plain => plain.includes(text), `${this.person.name} sees “${text}”`)
  }

  /** A paragraph at the end. */
  write(text: string): void {
    this.ydoc.transact(() => {
      const paragraph = new Y.XmlElement('paragraph')
      paragraph.insert(0, [new Y.XmlText(text)])
      this.fragment.push([paragraph])
    })
  }

  /** All there is to type into. */
  texts(): Y.XmlText[] {
    const below = (type: Y.XmlFragment): Y.XmlText[] => type.toArray().flatMap(child => child instanceof Y.XmlText ? [child] : child instanceof Y.XmlFragment ? below(child) : [])
    return below(this.fragment)
  }

  disconnect(): void {
    this.sheet.provider.disconnect()
  }

  close(): void {
    this.sheet.destroy()
    this.awareness.destroy()
  }
}

const open: Page[] = []

/** Opens the draft as this person; closed after the test by `closePages`. */
export async function openPage(person: Person, draft: Pick<Draft, 'revisionId' | 'epoch'>, options: OpenOptions = {}): Promise<Page> {
  const cookie = options.cookie ?? `${SESSION_COOKIE}=${(await openSessionFor(person)).cookie}`
  const page = new Page(person, draft, cookie, options)
  open.push(page)
  return page
}

export function closePages(): void {
  for (const page of open.splice(0)) page.close()
}
