/** EX_CONFIG of sysexits.h: the settings are wrong, and trying again will not help. */
const EXIT_CONFIG = 78

/** Ends the process with one line that says what is wrong. */
export function refuseStart(reason: string): never {
  process.stderr.write(`Standmark does not start: ${reason}\n`)
  process.exit(EXIT_CONFIG)
}
