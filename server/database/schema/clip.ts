import { sql } from 'drizzle-orm'
import { check, foreignKey, index, integer, jsonb, pgTable, real, text, unique, uuid } from 'drizzle-orm/pg-core'
import type { ClipRefusal, Filmstrip } from '#shared/schemas/clip'
import type { View } from '#shared/schemas/reading'
import { big, id, moment, timestamps } from './columns'
import { bout } from './bout'
import { session } from './session'
import { userAccount } from './user-account'

/** A recording: the uploaded original (never served) and the review copy that is made of it. */
export const clip = pgTable('clip', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  sessionId: uuid().notNull(),
  boutId: uuid(),
  uploadedById: uuid().notNull(),
  fileName: text().notNull(),
  /** As declared when the upload began, bytes; the stored object must have exactly this size. */
  size: big().notNull(),
  contentType: text().notNull(),
  view: text().$type<View>().notNull(),
  side: text({ enum: ['left', 'right'] }),
  recordedAt: moment(),
  status: text({ enum: ['uploading', 'processing', 'ready', 'refused'] }).notNull().default('uploading'),
  reason: text().$type<ClipRefusal>(),
  progress: real().notNull().default(0),
  /** Counts the runs of the job: a run that was overtaken may not write (fencing). */
  attempt: integer().notNull().default(0),
  /** The run that counts holds the clip until then and extends it as it works; past it another run may take over. */
  leaseUntil: moment(),
  /** Runs in which the media tools died by a signal or ran out of time: the second one ends it. */
  crashes: integer().notNull().default(0),
  originalKey: text().notNull(),
  uploadId: text(),
  partSize: integer().notNull(),
  partCount: integer().notNull(),
  reviewKey: text(),
  reviewSize: big(),
  posterKey: text(),
  filmstripKey: text(),
  filmstrip: jsonb().$type<Filmstrip>(),
  width: integer(),
  height: integer(),
  frameCount: integer(),
  frameRate: real(),
  durationMs: integer(),
  ...timestamps,
}, table => [
  unique('clip_clinic_id').on(table.clinicId, table.id),
  unique('clip_patient_id').on(table.clinicId, table.patientId, table.id),
  unique('clip_original_key').on(table.originalKey),
  index('clip_by_session').on(table.clinicId, table.sessionId, table.createdAt),
  index('clip_by_patient').on(table.clinicId, table.patientId, table.createdAt),
  index('clip_unfinished').on(table.status, table.updatedAt).where(sql`${table.status} in ('uploading', 'processing')`),
  foreignKey({ name: 'clip_session', columns: [table.clinicId, table.patientId, table.sessionId], foreignColumns: [session.clinicId, session.patientId, session.id] }).onDelete('restrict'),
  foreignKey({ name: 'clip_bout', columns: [table.clinicId, table.sessionId, table.boutId], foreignColumns: [bout.clinicId, bout.sessionId, bout.id] }).onDelete('restrict'),
  foreignKey({ name: 'clip_uploader', columns: [table.clinicId, table.uploadedById], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('restrict'),
  check('clip_view', sql`${table.view} in ('sagittal', 'frontal-anterior', 'frontal-posterior')`),
  check('clip_status', sql`${table.status} in ('uploading', 'processing', 'ready', 'refused')`),
  check('clip_reason', sql`(${table.status} = 'refused') = (${table.reason} is not null)`),
  check('clip_size', sql`${table.size} > 0`),
  check('clip_progress', sql`${table.progress} between 0 and 1`),
  check('clip_ready_is_whole', sql`${table.status} <> 'ready' or num_nonnulls(${table.reviewKey}, ${table.reviewSize}, ${table.posterKey}, ${table.filmstripKey}, ${table.width}, ${table.height}, ${table.frameCount}, ${table.frameRate}, ${table.durationMs}) = 9`),
])
