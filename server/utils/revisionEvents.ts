/**
 * Something about a revision has changed; whoever has it open is told to fetch it again.
 * Within this process only; other processes find out from the database, which each polls.
 */
import { EventEmitter } from 'node:events'

export interface RevisionEvent {
  revisionId: string
  /** `state`: state or title block; `check`: ticks and annotations. */
  what: 'state' | 'check'
}

class RevisionEvents {
  private readonly emitter = new EventEmitter().setMaxListeners(0)

  /** Call it after COMMIT, never before. */
  emit(event: RevisionEvent): void {
    this.emitter.emit('changed', event)
  }

  /** Returns a function that stops listening. */
  on(listener: (event: RevisionEvent) => void): () => void {
    this.emitter.on('changed', listener)
    return () => this.emitter.off('changed', listener)
  }
}

export const revisionEvents = new RevisionEvents()
