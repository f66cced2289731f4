import { logger } from '#server/adapters/logger'
import { settings, SettingsError } from '#server/adapters/settings'
import { openDatabase } from '#server/database/client'

/** Start: settings first; a missing or unsafe one ends the process with one clear line. */
export default defineNitroPlugin(() => {
  try {
    const { databaseUrl, secret } = settings()
    process.env.NUXT_SESSION_PASSWORD ??= secret
    openDatabase(databaseUrl, error => logger.warn({ err: error }, 'a database connection broke'))
  } catch (error) {
    if (!(error instanceof SettingsError)) throw error
    refuseStart(error.message)
  }
})
