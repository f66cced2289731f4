/**
 * Places for parts that are sent at the same time, shared by all uploads of the page. Who began first is served first:
 * the first clip is whole, and being prepared, while the next is still on its way.
 */
export function createSlotPool(places: number) {
  let free = places
  const waiting: { order: number, give: () => void }[] = []

  function release() {
    const next = waiting.shift()
    if (next) next.give()
    else free += 1
  }

  /** @returns what gives the place back. @throws the signal's reason. */
  function take(order: number, signal: AbortSignal): Promise<() => void> {
    signal.throwIfAborted()
    if (free > 0) {
      free -= 1
      return Promise.resolve(once(release))
    }
    return new Promise((resolve, reject) => {
      const entry = {
        order,
        give: () => {
          signal.removeEventListener('abort', leave)
          resolve(once(release))
        },
      }
      function leave() {
        waiting.splice(waiting.indexOf(entry), 1)
        reject(signal.reason)
      }
      signal.addEventListener('abort', leave, { once: true })
      const behind = waiting.findIndex(other => other.order > order)
      waiting.splice(behind === -1 ? waiting.length : behind, 0, entry)
    })
  }

  return { take }
}

export type SlotPool = ReturnType<typeof createSlotPool>

function once(act: () => void): () => void {
  let isDone = false
  return () => {
    if (isDone) return
    isDone = true
    act()
  }
}
