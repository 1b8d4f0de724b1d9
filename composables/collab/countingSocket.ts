import { MESSAGE_SYNC, SYNC_ANSWER, SYNC_UPDATE } from '~~/shared/collab/messages'

/** What a counting socket tells: a new connection begins, a content frame was handed to the network. */
export interface FrameCount {
  opened: () => void
  /** `sent`: number of this frame on its connection, from 1; `answer`: it answers the server's question, so it holds all that was written before. */
  frame: (sent: number, answer: boolean) => void
}

/**
 * A WebSocket that counts the frames that carry content. Both ends count alike, since a WebSocket keeps order,
 * so no number has to travel upwards and y-websocket's provider stays as it is.
 */
export function countingSocket(Base: typeof WebSocket, count: FrameCount): typeof WebSocket {
  return class extends Base {
    private sent = 0

    constructor(url: string | URL, protocols?: string | string[]) {
      super(url, protocols)
      count.opened()
    }

    override send(data: string | ArrayBufferLike | Blob | ArrayBufferView<ArrayBuffer>): void {
      if (data instanceof Uint8Array && data[0] === MESSAGE_SYNC && (data[1] === SYNC_ANSWER || data[1] === SYNC_UPDATE)) {
        this.sent++
        count.frame(this.sent, data[1] === SYNC_ANSWER)
      }
      super.send(data)
    }
  }
}
