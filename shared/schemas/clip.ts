import { z } from 'zod'
import { IdSchema, lineText, listOf, MomentSchema, PageQuerySchema, SideSchema } from './common'
import { ViewSchema } from './reading'

/** The largest file that is taken. */
export const MAX_UPLOAD_BYTES = 2 * 1024 ** 3
/** What a camera or a phone may send; the content decides, this only refuses the obvious early (415). */
export const CLIP_CONTENT_TYPES = ['video/mp4', 'video/quicktime', 'video/webm', 'video/x-matroska', 'video/x-m4v', 'video/3gpp'] as const

/** Why a clip was refused; each has its sentence and its next step in the messages `clip.refused.<reason>`. */
export const CLIP_REFUSALS = [
  'empty-file', 'size-mismatch', 'too-large', 'not-a-video', 'recording-incomplete', 'no-picture', 'too-short', 'too-long',
  'picture-too-large', 'picture-too-small', 'frame-rate-unsupported', 'codec-unsupported', 'rotation-unsupported', 'too-many-streams',
  'damaged', 'consent-withdrawn', 'could-not-process',
] as const
export type ClipRefusal = typeof CLIP_REFUSALS[number]

export const CLIP_STATUSES = ['uploading', 'processing', 'ready', 'refused'] as const

/** Body of `POST /api/sessions/:id/clips`. `size` in bytes. */
export const ClipInputSchema = z.strictObject({
  fileName: lineText(255, 1),
  size: z.number().int().min(0).max(Number.MAX_SAFE_INTEGER),
  contentType: z.string().trim().max(100),
  view: ViewSchema,
  side: SideSchema.optional(),
  boutId: IdSchema.optional(),
  recordedAt: MomentSchema.optional(),
})
export type ClipInput = z.infer<typeof ClipInputSchema>

export const ClipSchema = z.object({
  id: IdSchema,
  sessionId: IdSchema,
  patientId: IdSchema,
  boutId: IdSchema.nullable(),
  fileName: z.string(),
  size: z.number().int(),
  contentType: z.string(),
  view: ViewSchema,
  side: SideSchema.nullable(),
  recordedAt: z.string().nullable(),
  status: z.enum(CLIP_STATUSES),
  reason: z.enum(CLIP_REFUSALS).nullable(),
  /** Share of the review copy that is made, 0 to 1, while `processing`. */
  progress: z.number(),
  /** Of the review copy; null until it is ready. `frameRate` is the mean over the clip. */
  width: z.number().int().nullable(),
  height: z.number().int().nullable(),
  frameCount: z.number().int().nullable(),
  frameRate: z.number().nullable(),
  durationMs: z.number().int().nullable(),
  stillCount: z.number().int(),
  markingCount: z.number().int(),
  createdAt: z.string(),
})
export type Clip = z.infer<typeof ClipSchema>
export const ClipListSchema = listOf(ClipSchema)
export const ClipListQuerySchema = PageQuerySchema

export const UploadPlanSchema = z.object({ partSize: z.number().int(), partCount: z.number().int() })
export const ClipCreatedSchema = z.object({ clip: ClipSchema, upload: UploadPlanSchema })
export const ClipAnswerSchema = z.object({ clip: ClipSchema })

/** `GET /api/clips/:id/upload`: the plan and the parts that the storage already holds. */
export const UploadStateSchema = UploadPlanSchema.extend({
  parts: z.array(z.object({ partNumber: z.number().int(), size: z.number().int(), etag: z.string() })),
})
export type UploadState = z.infer<typeof UploadStateSchema>

export const UploadPartsInputSchema = z.strictObject({ partNumbers: z.array(z.number().int().min(1).max(10_000)).min(1).max(100) })
export const UploadPartsSchema = z.object({ parts: z.array(z.object({ partNumber: z.number().int(), url: z.string() })) })
export const UploadCompleteInputSchema = z.strictObject({
  parts: z.array(z.strictObject({ partNumber: z.number().int().min(1).max(10_000), etag: z.string().min(1).max(200) })).min(1).max(10_000),
})
export type UploadCompleteInput = z.infer<typeof UploadCompleteInputSchema>

/** `GET /api/clips/:id/frames`: presentation time of each frame in microseconds, counted from the first. */
export const FrameTableSchema = z.object({ timesUs: z.array(z.number().int()) })
export type FrameTable = z.infer<typeof FrameTableSchema>

/**
 * `GET /api/clips/:id/filmstrip.json`: how the sprite `GET /api/clips/:id/filmstrip` is laid out, pixels of the sprite.
 * Tile k lies in column k mod columns, row floor(k / columns), and shows `frames[k]`.
 */
export const FilmstripSchema = z.object({
  columns: z.number().int(),
  rows: z.number().int(),
  tileWidth: z.number().int(),
  tileHeight: z.number().int(),
  frames: z.array(z.number().int()),
})
export type Filmstrip = z.infer<typeof FilmstripSchema>
