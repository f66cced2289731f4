import { logger } from '#server/adapters/logger'
import { media } from '#server/adapters/media'
import { startConfiguredWorker, type QueueWorker } from '#server/adapters/queue'
import { settings } from '#server/adapters/settings'
import { storage } from '#server/adapters/storage'
import { JOBS } from '#server/jobs/index'

/** How long running jobs may take to give up when the process is asked to stop. */
const GRACE_MS = 8_000
const RETRY_MS = 5_000

function report(error: unknown): void {
  logger.warn({ err: error }, 'the job queue reported an error')
}

/** Queues each repeating job now and then at its interval; the queue holds one of its kind at most. */
function repeat(worker: QueueWorker): NodeJS.Timeout[] {
  return Object.entries(JOBS).flatMap(([name, { everySeconds }]) => {
    if (!everySeconds) return []
    const queue = () => void worker.send(name, {}).catch(report)
    queue()
    return [setInterval(queue, everySeconds * 1000)]
  })
}

async function prepareFolders(): Promise<void> {
  const removed = await media().sweepFolders()
  logger.info({ cage: await media().cage(), removed }, 'media tools are ready')
}

/** Takes jobs in processes with the role `worker` or `all`. Tries until the database is there: a worker may start before it. */
export default defineNitroPlugin((nitroApp) => {
  if (settings().role === 'web') return
  const stopping = new AbortController()
  let worker: QueueWorker | undefined
  let timers: NodeJS.Timeout[] = []

  async function start(): Promise<void> {
    await prepareFolders()
    while (!worker && !stopping.signal.aborted) {
      worker = await startConfiguredWorker(JOBS, report).catch((error: unknown) => {
        logger.warn({ err: error }, 'the job queue is not there yet')
        return undefined
      })
      if (!worker) await new Promise(resolve => setTimeout(resolve, RETRY_MS))
    }
    if (worker) timers = repeat(worker)
    logger.info({ jobs: Object.keys(JOBS) }, 'taking jobs')
  }
  start().catch(report)

  nitroApp.hooks.hook('close', async () => {
    stopping.abort()
    timers.forEach(clearInterval)
    await worker?.stop(GRACE_MS)
    storage().close()
  })
})
