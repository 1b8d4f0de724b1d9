/** The way of one document's updates into the log: in order, one transaction at a time, tried again while the database is away. */
import { CLOSE, type CloseCode } from '../../shared/collab/messages'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { errorFields, log } from '../utils/log'
import { DamagedLog, type Appended, type LogRow } from './log'
import type { QueuedEntry } from './room'

export interface CommitterHooks {
  append: (entries: readonly QueuedEntry[]) => Promise<Appended>
  /** After COMMIT. */
  committed: (entries: readonly QueuedEntry[], first: number, foreign: readonly LogRow[]) => void
  /** The document cannot go on in memory. */
  gone: (code: CloseCode, reason: string) => void
}

const FIRST_PAUSE = 50
const LONGEST_PAUSE = 2000

export class Committer {
  private readonly queue: QueuedEntry[] = []
  private bytes = 0
  private running = false
  private stopped = false
  private wake: (() => void) | null = null
  private waiters: (() => void)[] = []
  /** Entries ever taken in, and how many of them are committed. */
  position = 0
  settled = 0

  constructor(private readonly hooks: CommitterHooks) {}

  get waiting(): readonly QueuedEntry[] { return this.queue }
  get isIdle() { return this.queue.length === 0 }

  enqueue(entry: QueuedEntry): void {
    this.queue.push(entry)
    this.position++
    this.bytes += entry.bytes.length
    if (this.bytes > COLLABORATION_LIMITS.queue) {
      // Not from within the caller's work on the document.
      queueMicrotask(() => this.hooks.gone(CLOSE.tryAgain, 'too much is waiting to be saved'))
      return
    }
    void this.run()
  }

  private async run() {
    if (this.running) return
    this.running = true
    try {
      while (this.queue.length > 0 && !this.stopped) await this.commitNext()
    }
    catch (error) {
      log('error', 'collab.commit_failed', errorFields(error))
      this.hooks.gone(CLOSE.tryAgain, 'could not be saved')
    }
    finally {
      this.running = false
      this.release()
    }
  }

  private nextBatch(): QueuedEntry[] {
    let bytes = 0
    const end = this.queue.findIndex((entry, i) => {
      bytes += entry.bytes.length
      return i > 0 && (i >= COLLABORATION_LIMITS.batchRows || bytes > COLLABORATION_LIMITS.batch)
    })
    return this.queue.slice(0, end === -1 ? this.queue.length : end)
  }

  private async commitNext() {
    const batch = this.nextBatch()
    const appended = await this.appendPatiently(batch)
    if (this.stopped || !appended) return
    if (appended.kind === 'frozen') return this.hooks.gone(CLOSE.frozen, 'no longer a draft')
    if (appended.kind === 'taken') return this.refuseTaken(batch, appended.client)
    this.queue.splice(0, batch.length)
    this.bytes -= batch.reduce((sum, entry) => sum + entry.bytes.length, 0)
    this.settled += batch.length
    this.hooks.committed(batch, appended.first, appended.foreign)
  }

  /** Another process bound the client id to somebody else in the same moment. Nobody uses it twice by chance. */
  private refuseTaken(batch: readonly QueuedEntry[], client: number) {
    batch.find(entry => entry.newClients.includes(client))?.from?.end(CLOSE.noRight, 'written in another person\'s name')
    this.hooks.gone(CLOSE.tryAgain, 'the document is read again')
  }

  private async appendPatiently(batch: readonly QueuedEntry[]): Promise<Appended | null> {
    const until = Date.now() + COLLABORATION_LIMITS.giveUp
    for (let pause = FIRST_PAUSE; !this.stopped; pause = Math.min(pause * 2, LONGEST_PAUSE)) {
      try {
        return await this.hooks.append(batch)
      }
      catch (error) {
        if (error instanceof DamagedLog || Date.now() + pause > until) throw error
        log('warn', 'collab.commit_retried', errorFields(error))
        await this.pause(pause)
      }
    }
    return null
  }

  private pause(milliseconds: number): Promise<void> {
    return new Promise((resolve) => {
      const timer = setTimeout(resolve, milliseconds)
      this.wake = () => {
        clearTimeout(timer)
        resolve()
      }
    })
  }

  drained(): Promise<void> {
    if (!this.running && (this.isIdle || this.stopped)) return Promise.resolve()
    return new Promise(resolve => this.waiters.push(resolve))
  }

  private release() {
    const waiters = this.waiters
    this.waiters = []
    for (const resolve of waiters) resolve()
  }

  stop(): void {
    this.stopped = true
    this.wake?.()
  }
}
