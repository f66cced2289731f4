import { CLIP_CONTENT_TYPES, MAX_UPLOAD_BYTES } from '#shared/schemas/clip'
import type { NamedFile } from './fingerprint'

/** What a file is called by its name's ending, for systems that do not know the kind themselves. */
const BY_ENDING: Readonly<Record<string, typeof CLIP_CONTENT_TYPES[number]>> = {
  'mp4': 'video/mp4', 'm4v': 'video/x-m4v', 'mov': 'video/quicktime', 'qt': 'video/quicktime', 'webm': 'video/webm', 'mkv': 'video/x-matroska', '3gp': 'video/3gpp',
}

export type EarlyRefusal = 'empty-file' | 'too-large' | 'not-a-video' | 'unreadable'

/** @returns the content type to declare, or null when it is no kind of video that is taken. The content decides in the end. */
export function contentTypeOf({ name, type }: Pick<NamedFile, 'name' | 'type'>): string | null {
  const declared = type.split(';')[0]?.trim().toLowerCase() ?? ''
  const known = CLIP_CONTENT_TYPES.find(one => one === declared)
  if (known) return known
  // A system that says nothing, or only "bytes", leaves it to the name; one that says text or sound is believed.
  if (declared !== '' && declared !== 'application/octet-stream') return null
  return BY_ENDING[name.split('.').at(-1)?.toLowerCase() ?? ''] ?? null
}

/** @returns what is plainly wrong with a file before anything is sent, or null. */
export function refuseEarly(file: NamedFile): EarlyRefusal | null {
  if (contentTypeOf(file) === null) return 'not-a-video'
  if (file.size === 0) return 'empty-file'
  return file.size > MAX_UPLOAD_BYTES ? 'too-large' : null
}
