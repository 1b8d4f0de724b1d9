/**
 * The collaboration socket. Its hooks are set for the whole application and not at the route, because those of a route
 * are looked up asynchronously for each message, and frames are counted in the order in which they came.
 */
import type { Peer } from 'crossws'
import { readSocketAddress, type SocketAddress } from '#shared/collab/messages'
import { COLLABORATION_LIMITS } from '#shared/limits'
import { createSheetLog } from '../collab/log'
import { watchRights } from '../collab/rights'
import { Rooms } from '../collab/rooms'
import { Socket } from '../collab/socket'
import type { Wire } from '../collab/wire'
import { sequelize } from '../database'

/** What Node's socket has beyond the browser's. */
interface NodeSocket { ping: () => void, on: (event: 'pong', listener: () => void) => void, bufferedAmount: number }

const nodeSocket = (peer: Peer) => peer.websocket as unknown as NodeSocket

const wireOf = (peer: Peer): Wire => ({
  send: bytes => void peer.send(bytes),
  close: (code, reason) => peer.close(code, reason),
  terminate: () => peer.terminate(),
  ping: () => nodeSocket(peer).ping(),
  waiting: () => nodeSocket(peer).bufferedAmount,
})

/** Status only: a refused upgrade is for programs, pages are told by close codes. */
function checkUpgrade(request: { url: string, headers: Headers }): Response | undefined {
  if (!isOwnOrigin(request.headers.get('origin'), request.headers.get('host'))) {
    log('warn', 'foreign_origin', { method: 'UPGRADE', origin: request.headers.get('origin') })
    return new Response(null, { status: 403 })
  }
  return readSocketAddress(request.url) ? undefined : new Response(null, { status: 404 })
}

function createHooks(rooms: Rooms) {
  const sockets = new WeakMap<Peer, Socket>()
  return {
    upgrade: checkUpgrade,
    open: (peer: Peer) => {
      const address = readSocketAddress(peer.request.url) as SocketAddress
      const socket = new Socket(rooms, wireOf(peer), address)
      sockets.set(peer, socket)
      nodeSocket(peer).on('pong', () => socket.pong())
      void socket.open(async () => {
        await serverReady()
        return actorOfHeaders(peer.request.headers)
      })
    },
    message: (peer: Peer, message: { uint8Array: () => Uint8Array }) => {
      const { buffer, byteOffset, length } = message.uint8Array()
      sockets.get(peer)?.receive(new Uint8Array(buffer, byteOffset, length))
    },
    close: (peer: Peer) => sockets.get(peer)?.closed(),
    error: (peer: Peer) => sockets.get(peer)?.closed(),
  }
}

export default defineNitroPlugin((nitroApp) => {
  const rooms = new Rooms(createSheetLog(sequelize), watchRights)
  // `serverOptions` is handed to the Node adapter, whose own limit is 100 MiB.
  const options = {
    serverOptions: { maxPayload: COLLABORATION_LIMITS.payload, perMessageDeflate: false },
    hooks: createHooks(rooms),
  }
  nitroApp.h3App.options.websocket = options
  rooms.start()
  const stopListening = [
    revocations.on(revocation => rooms.revoke(revocation)),
    revisionEvents.on(({ revisionId, what }) => rooms.notify(revisionId, what)),
  ]
  nitroApp.hooks.hook('close', async () => {
    for (const stop of stopListening) stop()
    await rooms.close()
  })
})
