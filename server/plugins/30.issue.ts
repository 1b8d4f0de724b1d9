import { closeMail } from '../mail'
import { closeBrowser } from '../pdf/browser'
import { registerPdfJob } from '../pdf/job'

/** The stamped PDF is made by a job; its browser and the mail connection end with the server. */
export default defineNitroPlugin((nitroApp) => {
  registerPdfJob()
  nitroApp.hooks.hook('close', async () => {
    await Promise.all([closeBrowser(), closeMail()])
  })
})
