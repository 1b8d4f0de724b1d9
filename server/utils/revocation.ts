/**
 * Rights that have just ended, for whoever holds a connection open on the strength of them.
 * Within this process only; other processes find out from the database, which each polls.
 */
import { EventEmitter } from 'node:events'

export type Revocation =
  | { kind: 'session', id: string }
  /** All sessions of a person, except one that goes on. */
  | { kind: 'user', id: string, exceptSession?: string }
  | { kind: 'membership', projectId: string, userId: string }
  /** A revision whose state has changed, so that it is no longer open for writing. */
  | { kind: 'revision', id: string }

class Revocations {
  private readonly emitter = new EventEmitter().setMaxListeners(0)

  /** Call it after COMMIT, never before. */
  emit(revocation: Revocation): void {
    this.emitter.emit('revocation', revocation)
  }

  /** Returns a function that stops listening. */
  on(listener: (revocation: Revocation) => void): () => void {
    this.emitter.on('revocation', listener)
    return () => this.emitter.off('revocation', listener)
  }
}

export const revocations = new Revocations()
