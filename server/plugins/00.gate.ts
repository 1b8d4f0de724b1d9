/** Nitro does not wait for plugins, so the gate is asked again at each request (server/middleware/00.gate.ts). */
export default defineNitroPlugin(() => {
  serverReady().then(
    () => log('info', 'ready'),
    (error) => {
      log('error', 'not_started', errorFields(error))
      process.exit(1)
    },
  )
})
