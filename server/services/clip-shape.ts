import type { ClipRow } from '#server/database/queries/clip-queries'
import type { Clip } from '#shared/schemas/clip'

/** Bytes of every part but the last. The storage takes no part under 5 MiB before the last, and lists 1000 a page. */
export const PART_BYTES = 8 * 1024 * 1024

/** @returns how a file of `size` bytes is cut into parts. */
export function planUpload(size: number): { partSize: number, partCount: number } {
  return { partSize: PART_BYTES, partCount: Math.max(1, Math.ceil(size / PART_BYTES)) }
}

/** @returns the bytes of one part, counted from 1. */
export function sizeOfPart(upload: { size: number, partSize: number, partCount: number }, partNumber: number): number {
  return partNumber === upload.partCount ? upload.size - (upload.partCount - 1) * upload.partSize : upload.partSize
}

type Row = ClipRow['clip']

/** @returns a clip as the interface shows it; where its objects lie stays inside. */
export function toClip(row: Row, counts: { stillCount: number, markingCount: number } = { stillCount: 0, markingCount: 0 }): Clip {
  const isReady = row.status === 'ready'
  return {
    id: row.id, sessionId: row.sessionId, patientId: row.patientId, boutId: row.boutId,
    fileName: row.fileName, size: row.size, contentType: row.contentType, view: row.view, side: row.side,
    recordedAt: row.recordedAt?.toISOString() ?? null, createdAt: row.createdAt.toISOString(),
    status: row.status, reason: row.reason, progress: isReady ? 1 : row.progress,
    width: row.width, height: row.height, frameCount: row.frameCount, frameRate: row.frameRate, durationMs: row.durationMs,
    stillCount: counts.stillCount, markingCount: counts.markingCount,
  }
}
