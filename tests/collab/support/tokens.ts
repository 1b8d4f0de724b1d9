/** Writers whose every edit carries a word of its own, so that what became of each can be told afterwards. */
import { expect } from 'vitest'
import type * as Y from 'yjs'
import { allCommitted } from '../../../shared/collab/saving'
import type { Page } from './sheet'

/** Numbers between 0 and 1 that are the same for the same seed (mulberry32, public domain). */
export function randomFrom(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6D2B79F5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state)
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296
  }
}

export class Writer {
  /** Words that were called saved. */
  readonly saved = new Set<string>()
  readonly written: string[] = []
  private onTheWay: { word: string, frame: number, connection: number }[] = []
  private connection = 0

  constructor(readonly page: Page, private readonly name: string, private readonly random: () => number) {
    page.sheet.provider.on('status', ({ status }) => {
      if (status === 'connecting') this.connection++
    })
    page.ydoc.on('update', () => this.note())
  }

  /** Called whenever the page hears of a commit. */
  note(): void {
    const facts = this.page.sheet.facts()
    if (allCommitted(facts)) this.written.forEach(word => this.saved.add(word))
    for (const { word, frame, connection } of this.onTheWay) {
      if (connection === this.connection && facts.answer !== null && facts.upTo >= frame) this.saved.add(word)
    }
  }

  private pick<T>(items: readonly T[]): T | undefined {
    return items[Math.floor(this.random() * items.length)]
  }

  /** Writes a new word somewhere. Words are never cut: only what lies between them, and whole older paragraphs without any, are deleted. */
  step(): void {
    const { page } = this
    const word = `<${this.name}${this.written.length}>`
    const text = this.random() < 0.5 ? this.pick(page.texts()) : undefined
    page.ydoc.transact(() => {
      if (text) text.insert(gapIn(text, this.random), `.${word}.`)
      else page.write(`.${word}.`)
    })
    this.written.push(word)
    const facts = page.sheet.facts()
    if (facts.connected) this.onTheWay.push({ word, frame: facts.sent, connection: this.connection })
    if (this.random() < 0.3) this.erase()
  }

  /** An edit that only deletes: one dot somewhere. */
  private erase() {
    const text = this.pick(this.page.texts())
    const plain = text ? String(text.toJSON()) : ''
    const at = plain.indexOf('.')
    if (text && at !== -1) text.delete(at, 1)
  }
}

/** A place in the text that is in no word. */
function gapIn(text: Y.XmlText, random: () => number): number {
  const plain = String(text.toJSON())
  const gaps = [...plain].map((_, i) => i).concat(plain.length).filter(i => plain.lastIndexOf('<', i - 1) <= plain.lastIndexOf('>', i - 1))
  return gaps[Math.floor(random() * gaps.length)] ?? 0
}

/** Each word that was called saved is in the document, and no word is in it twice. */
export function expectAllSaved(document: string, writers: readonly Writer[]): void {
  const plain = document.replaceAll('&lt;', '<').replaceAll('&gt;', '>')
  for (const writer of writers) {
    const lost = [...writer.saved].filter(word => !plain.includes(word))
    expect(lost, 'words that were called saved and are gone').toEqual([])
    const twice = writer.written.filter(word => plain.split(word).length > 2)
    expect(twice, 'words that are there twice').toEqual([])
  }
}
