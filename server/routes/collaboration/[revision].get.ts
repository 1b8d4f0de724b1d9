/** The socket's address (server/plugins/50.collaboration.ts) answered to a plain request. */
export default defineEventHandler(() => {
  throw refusal(426, { code: 'socket_only', help: 'This address is for live editing only. Open the sheet itself.' })
})
