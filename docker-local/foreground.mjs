import { setTimeout as sleep } from 'node:timers/promises'
import { endCommands } from './commands.mjs'
import { complainAbout, say } from './console.mjs'

const PARENT_CHECK_MS = 500
/** npm passes a Ctrl-C on that the terminal has sent us already; only a later one is impatience. */
const IMPATIENCE_AFTER_MS = 2000

/**
 * The life of a launcher in the foreground: begins, stays, and stops all it started on Ctrl-C, SIGTERM, a closed
 * terminal, or when its parent (npm) is gone.
 * @param {{
 *   begin: (life: { keep: (instance: { stop: () => Promise<void>, supervisor: { kill: () => void } }) => void }) => Promise<number | null>,
 *   hasParent?: boolean,
 * }} options `begin`: settles with an exit code when the work is done, or with null to stay; it hands over with `keep` what a
 *   stop has to stop. `hasParent`: false for a launcher that was detached on purpose
 */
export function liveInForeground({ begin, hasParent = true }) {
  /** @type {Parameters<Parameters<typeof begin>[0]['keep']>[0] | null} */
  let instance = null
  /** @type {number | null} */
  let stoppedAt = null
  const begun = begin({ keep: kept => (instance = kept) })

  /** @param {number} code */
  async function stop(code) {
    if (stoppedAt !== null) {
      if (Date.now() - stoppedAt > IMPATIENCE_AFTER_MS) instance?.supervisor.kill()
      return
    }
    stoppedAt = Date.now()
    const commandsEnded = endCommands()
    await instance?.stop()
    await commandsEnded
    // What `begin` was doing ends by itself now that nothing it starts may run; a wait for a lock does not.
    await Promise.race([begun.catch(() => undefined), sleep(3000)])
    await instance?.stop()
    process.exit(code)
  }

  for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
    process.on(signal, () => {
      if (stoppedAt === null) say('stopping')
      void stop(0)
    })
  }
  process.on('uncaughtException', (error) => {
    complainAbout(error)
    void stop(1)
  })
  if (hasParent) watchParent(() => void stop(0))
  begun.then(
    code => code === null ? undefined : stop(code),
    (error) => {
      if (stoppedAt === null) complainAbout(error)
      return stop(1)
    },
  )
}

/** @param {() => void} onVanished */
function watchParent(onVanished) {
  const parent = process.ppid
  const timer = setInterval(() => {
    if (process.ppid === parent) return
    clearInterval(timer)
    onVanished()
  }, PARENT_CHECK_MS)
}
