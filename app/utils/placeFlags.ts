export interface TimelineFlag { x: number, text: string, day: string, row: number, isTextShown: boolean, isLeftward: boolean }

/** Widths of the flag's letters cannot be asked for while rendering on the server; Lexend runs about this wide at 14 px. */
const LETTER_PX = 7.7
const POLE_PX = 18
const MOST_ROWS = 3

/**
 * Puts flags that would run into each other on different rows, at most three; one that still finds no room keeps its pole
 * without words (the table twin has them all).
 */
export function placeFlags(flags: readonly { x: number, text: string, day: string }[], width: number): { flags: TimelineFlag[], rows: number } {
  const ends: number[] = []
  const placed = flags.map((flag) => {
    const wide = POLE_PX + flag.text.length * LETTER_PX
    const isLeftward = flag.x + wide > width
    const start = isLeftward ? flag.x - wide : flag.x
    const row = [...ends, -Infinity].slice(0, MOST_ROWS).findIndex(end => end + 8 < start)
    const isTextShown = row >= 0 && start >= -140
    if (isTextShown) ends[row] = Math.max(start + wide, flag.x + 12)
    return { ...flag, row: Math.max(0, row), isTextShown, isLeftward }
  })
  return { flags: placed, rows: Math.max(1, ends.length) }
}
