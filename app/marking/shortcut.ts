/** A key press, free of the DOM. `key` as the standard names it: `ArrowLeft`, `z`, ` `. */
export interface KeyPress {
  readonly key: string
  readonly shift: boolean
  readonly alt: boolean
  readonly ctrl: boolean
  readonly meta: boolean
}

interface Shortcut { readonly key: string, readonly shift: boolean, readonly alt: boolean, readonly mod: boolean }

/** Reads `Mod+Shift+Z`, `Alt+ArrowLeft`, `Space`, `Plus`; `Mod` is Ctrl, or Command where there is one. */
function parseShortcut(text: string): Shortcut {
  const parts = text.split('+')
  const key = parts.at(-1) ?? ''
  const names: Readonly<Record<string, string>> = { Space: ' ', Plus: '+' }
  return {
    key: (names[key] ?? key).toLowerCase(),
    shift: parts.includes('Shift'),
    alt: parts.includes('Alt'),
    mod: parts.includes('Mod'),
  }
}

/** `+`, `?` and the like need Shift on some keyboards and not on others, so there Shift does not count. */
function ignoresShift(key: string): boolean {
  return key.length === 1 && !/[a-z0-9 ]/.test(key)
}

/** @param shortcut as in `Mod+Shift+Z`. @returns whether the key press is that shortcut, no more and no less. */
export function matchesShortcut(press: KeyPress, shortcut: string): boolean {
  const wanted = parseShortcut(shortcut)
  return press.key.toLowerCase() === wanted.key
    && (press.ctrl || press.meta) === wanted.mod
    && press.alt === wanted.alt
    && (press.shift === wanted.shift || ignoresShift(wanted.key))
}
