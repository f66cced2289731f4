const PREFIX = 'standmark-upload-'

/** Tells the other windows of this browser, as long as it runs, that this one takes care of an upload. */
export async function holdUpload(clipId: string, run: Promise<unknown>): Promise<void> {
  if (!('locks' in navigator)) return
  await navigator.locks.request(`${PREFIX}${clipId}`, { ifAvailable: true }, lock => lock ? run : undefined)
}

/** @returns the clips whose upload a window of this browser takes care of just now. */
export async function heldUploads(): Promise<ReadonlySet<string>> {
  if (!('locks' in navigator)) return new Set()
  const { held = [] } = await navigator.locks.query()
  return new Set(held.flatMap(({ name }) => name?.startsWith(PREFIX) ? [name.slice(PREFIX.length)] : []))
}
