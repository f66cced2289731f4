/** What the launcher says to the person at the terminal. */

/** A failure whose message is meant for people: shown without a stack trace. */
export class StartError extends Error {
  /**
   * @param {string} message one clear sentence
   * @param {{ cause?: unknown, details?: string }} [options] `details`: lines shown under the message, such as the end of a log
   */
  constructor(message, options = {}) {
    super(message, { cause: options.cause })
    this.name = 'StartError'
    this.details = options.details ?? ''
  }
}

// The reader of our output may go away (`npm start | head`); that must not end the ward's day.
for (const stream of [process.stdout, process.stderr]) stream.on('error', () => undefined)

/** @param {string} line */
export function say(line) {
  process.stdout.write(`${line}\n`)
}

/** @param {string} line */
export function complain(line) {
  process.stderr.write(`${line}\n`)
}

/**
 * Prints an error as a person wants to read it: the message, then details, and a stack only for what nobody foresaw.
 * @param {unknown} error
 */
export function complainAbout(error) {
  if (error instanceof StartError) {
    complain(`standmark: ${error.message}`)
    if (error.details) complain(error.details)
    return
  }
  complain(error instanceof Error ? `standmark: unexpected failure\n${error.stack}` : `standmark: ${String(error)}`)
}
