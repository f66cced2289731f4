/** Handles open a file again after a reload. Only some browsers have them; without, the person picks the file again. */
declare global {
  interface FileSystemHandle {
    queryPermission?: (options: { mode: 'read' }) => Promise<PermissionState>
    requestPermission?: (options: { mode: 'read' }) => Promise<PermissionState>
  }
  interface DataTransferItem { getAsFileSystemHandle?: () => Promise<FileSystemHandle | null> }
  interface Window {
    showOpenFilePicker?: (options: { multiple: boolean, types: { description: string, accept: Record<string, string[]> }[] }) => Promise<FileSystemFileHandle[]>
  }
}

/** A file that the person chose, with what opens it again where there is such a thing. */
export interface OpenedFile { readonly file: File, readonly handle: FileSystemFileHandle | null }

/** Whether this browser's own file dialogue gives handles. */
export function hasFilePicker(): boolean {
  return typeof window !== 'undefined' && typeof window.showOpenFilePicker === 'function'
}

/** Opens the file dialogue. @returns null when the person closed it, or the browser does not let us. */
export async function pickFiles(options: { multiple: boolean, description: string, accept: Record<string, string[]> }): Promise<OpenedFile[] | null> {
  try {
    const handles = await window.showOpenFilePicker?.({ multiple: options.multiple, types: [{ description: options.description, accept: options.accept }] })
    return await Promise.all((handles ?? []).map(async handle => ({ file: await handle.getFile(), handle })))
  } catch {
    return null
  }
}

/** The files of a drop. The list lives only as long as the event, so everything is asked for at once. */
export async function droppedFiles(transfer: DataTransfer): Promise<OpenedFile[]> {
  const items = [...transfer.items].filter(item => item.kind === 'file')
  const asked = items.map(item => ({ file: item.getAsFile(), handle: item.getAsFileSystemHandle?.() ?? Promise.resolve(null) }))
  const found = await Promise.all(asked.map(async ({ file, handle }) => ({ file, handle: fileHandleOf(await handle.then(null, () => null)) })))
  return found.flatMap(({ file, handle }) => file ? [{ file, handle }] : [])
}

/** @returns the value when it is a handle of a file; it comes from a drop or from what the browser kept. */
export function fileHandleOf(value: unknown): FileSystemFileHandle | null {
  return typeof FileSystemFileHandle !== 'undefined' && value instanceof FileSystemFileHandle ? value : null
}

/**
 * Opens a kept handle.
 * @param mayAsk whether the browser may ask the person, which needs a press just before
 * @returns null when it may not be read, or is not there any more
 */
export async function reopenFile(handle: FileSystemFileHandle, mayAsk: boolean): Promise<File | null> {
  try {
    const now = await handle.queryPermission?.({ mode: 'read' }) ?? 'granted'
    const answer = now === 'prompt' && mayAsk ? await handle.requestPermission?.({ mode: 'read' }) : now
    return answer === 'granted' ? await handle.getFile() : null
  } catch {
    return null
  }
}
