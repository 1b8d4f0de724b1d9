/** Starts the workers when the server is ready, and lets the jobs in hand end when it stops. */
import { closeCalc } from '../calc'
import { registerEmailJob } from '../jobs/email'
import { startWorker } from '../jobs/worker'
import { prepareSigning } from '../signing/keys'

/** Two, so that letters do not wait for a file that is being made. */
const WORKERS = 2

export default defineNitroPlugin((nitroApp) => {
  registerEmailJob()
  const workers = serverReady().then(async () => {
    await prepareSigning()
    return Array.from({ length: WORKERS }, startWorker)
  })
  workers.catch((error: unknown) => log('error', 'jobs_not_started', errorFields(error)))
  nitroApp.hooks.hook('close', async () => {
    const started = await workers.catch(() => [])
    await Promise.all(started.map(worker => worker.stop()))
    closeCalc()
  })
})
