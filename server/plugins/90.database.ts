import { sequelize } from '../database'

/** Registered last, so that whatever flushes at the end still has its connection. */
export default defineNitroPlugin((nitroApp) => {
  nitroApp.hooks.hook('close', () => sequelize.close())
})
