import * as decoding from 'lib0/decoding'
import { CLOSE, MESSAGE_CHANGED, changedSchema, readOwnMessage } from '#shared/collab/messages'

/** How often the server is asked while its socket is silent or away: in milliseconds. */
const ASK_EVERY = 4000
const LASTED = 5000
const TRY_AGAIN = [1000, 2000, 5000, 10_000, 20_000]

/** What the frame says has changed; null for every other frame. */
export function changedIn(frame: ArrayBuffer): string | null {
  const decoder = decoding.createDecoder(new Uint8Array(frame))
  if (decoder.arr.length === 0 || decoding.readVarUint(decoder) !== MESSAGE_CHANGED) return null
  return readOwnMessage(decoder, changedSchema)?.what ?? null
}

/**
 * Calls `changed` when the server says that the revision, its ticks or its annotations are other than they were.
 * The socket is told no epoch, so it carries such notices and no document. While it is away, the server is asked every few seconds instead,
 * as long as the page is looked at.
 */
export function useRevisionEvents(revisionId: string, changed: () => Promise<void>) {
  let socket: WebSocket | null = null
  let tries = 0
  let opened = Number.POSITIVE_INFINITY
  let over = false
  let again: ReturnType<typeof setTimeout> | undefined
  const visible = useDocumentVisibility()

  async function tell() {
    await changed().catch(() => {})
  }

  function connect() {
    if (over) return
    const scheme = location.protocol === 'https:' ? 'wss' : 'ws'
    socket = new WebSocket(`${scheme}://${location.host}/collaboration/${revisionId}`)
    socket.binaryType = 'arraybuffer'
    socket.onopen = () => { opened = Date.now() }
    socket.onmessage = (event: MessageEvent<unknown>) => {
      if (event.data instanceof ArrayBuffer && changedIn(event.data) !== null) void tell()
    }
    socket.onclose = (event) => {
      socket = null
      // A connection that is refused at once opens too, so only one that lasted begins the count anew.
      if (Date.now() - opened > LASTED) tries = 0
      opened = Number.POSITIVE_INFINITY
      if (event.code === CLOSE.frozen || event.code === CLOSE.outdated) void tell()
      if (event.code === CLOSE.signedOut || event.code === CLOSE.noRight || event.code === CLOSE.notFound) over = true
      again = setTimeout(connect, TRY_AGAIN[Math.min(tries++, TRY_AGAIN.length - 1)])
    }
  }

  const ask = useIntervalFn(() => {
    if (socket?.readyState !== WebSocket.OPEN && visible.value === 'visible' && !over) void tell()
  }, ASK_EVERY, { immediate: false })

  onMounted(() => {
    connect()
    ask.resume()
  })
  onBeforeUnmount(() => {
    over = true
    clearTimeout(again)
    socket?.close()
  })
}
