import { logger } from '#server/adapters/logger'
import { settings } from '#server/adapters/settings'
import { holdsDemoData } from '#server/services/demo-data-service'

const RETRY_MS = 5_000

/** In production the demo clinic is never served: everybody knows its passwords. Asked at start, until the database answers. */
export default defineNitroPlugin((nitroApp) => {
  if (settings().mode !== 'production') return
  let timer: NodeJS.Timeout | undefined

  async function check(): Promise<void> {
    const isDemo = await holdsDemoData().catch((error: unknown) => {
      logger.warn({ err: error }, 'the database could not be asked for demo data yet')
      timer = setTimeout(() => void check(), RETRY_MS)
      timer.unref()
      return false
    })
    if (isDemo) refuseStart('the database holds the demo clinic, whose passwords everybody knows; production needs a database of its own')
  }
  void check()
  nitroApp.hooks.hook('close', () => clearTimeout(timer))
})
