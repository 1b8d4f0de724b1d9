/** A socket from its opening on: who it is and what it may is found out first; what arrives meanwhile waits, within bounds. */
import { CLOSE, type CloseCode, type SocketAddress } from '../../shared/collab/messages'
import { DOCUMENT_FORMAT } from '../../shared/document/types'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import type { Actor } from '../../shared/policies/actor'
import { errorFields, log } from '../utils/log'
import type { Connection } from './connection'
import { admit, standsOf } from './rights'
import type { Rooms } from './rooms'
import type { Wire } from './wire'

export class Socket {
  private connection: Connection | null = null
  private early: Uint8Array[] = []
  private earlyBytes = 0
  private isOver = false

  constructor(private readonly rooms: Rooms, private readonly wire: Wire, private readonly address: SocketAddress) {}

  /**
   * Refusals close with a code after the upgrade: a page cannot tell a refused upgrade from a network fault, and tries for ever.
   * @param whoIs the person of the session that came with the request
   */
  async open(whoIs: () => Promise<Actor | null>): Promise<void> {
    try {
      const actor = await whoIs()
      if (!actor) return this.refuse(CLOSE.signedOut, 'signed out')
      await this.openFor(actor)
    }
    catch (error) {
      log('error', 'collab.admission_failed', errorFields(error))
      this.refuse(CLOSE.tryAgain, 'try again')
    }
  }

  private async openFor(actor: Actor) {
    const { revisionId, epoch, format } = this.address
    const stand = (await standsOf([revisionId])).get(revisionId)
    const admission = admit(actor, stand, epoch === undefined ? { kind: 'notices' } : { kind: 'document', epoch })
    if (!admission.ok) return this.refuse(admission.code, admission.reason)
    if (admission.mode !== 'notices' && format !== DOCUMENT_FORMAT) return this.refuse(CLOSE.outdated, 'reload the page')
    if (this.isOver) return
    const holder = { sessionId: actor.sessionId, userId: actor.id, name: actor.name, initials: actor.initials }
    this.connection = this.rooms.join({ revisionId, mode: admission.mode, holder, epoch: epoch ?? null }, this.wire)
    for (const bytes of this.early) this.connection.receive(bytes)
    this.early = []
  }

  private refuse(code: CloseCode, reason: string) {
    if (this.isOver) return
    this.isOver = true
    this.early = []
    log('info', 'collab.not_admitted', { revision: this.address.revisionId, code })
    this.wire.close(code, reason)
  }

  receive(bytes: Uint8Array): void {
    if (this.isOver) return
    if (this.connection) return this.connection.receive(bytes)
    this.earlyBytes += bytes.length
    if (this.earlyBytes > COLLABORATION_LIMITS.held) return this.refuse(CLOSE.slowDown, 'too much before admission')
    this.early.push(bytes)
  }

  pong(): void {
    this.connection?.answersPing()
  }

  closed(): void {
    this.isOver = true
    this.early = []
    this.connection?.over()
  }
}
