import { closeDatabase } from '#server/database/client'

/** Stop: the database last. Hooks run in the order of these files, and what stops before still writes. */
export default defineNitroPlugin((nitroApp) => {
  nitroApp.hooks.hook('close', closeDatabase)
})
