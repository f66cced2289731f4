import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { expect } from 'vitest'
import { z } from 'zod'
import { formatReading } from '#shared/geometry/reading-format'
import { MarkingsSchema, type Marking } from '#shared/schemas/marking'
import type { ReadingJson } from '#shared/schemas/reading'
import landmarkTexts from '../../app/i18n/locales/en/landmarks.json'
import markingTexts from '../../app/i18n/locales/en/marking.json'
import measureTexts from '../../app/i18n/locales/en/measures.json'
import { expectBody } from '../fixtures/api/answers'
import type { Person } from '../fixtures/api/people'
import type { Bench } from './bench-page'

/**
 * The drawn figures of the demo clips, whose joints are known because the renderer put them there: truth.json is written
 * by the renderer, which works the angles out from the joints in millimetres with its own formulas, not with the program's.
 */
const DEMO = new URL('../../docker-local/demo/', import.meta.url)
const PointSchema = z.object({ x: z.number(), y: z.number() })
const TruthSchema = z.object({
  view: z.enum(['sagittal', 'frontal-anterior', 'frontal-posterior']),
  facing: z.enum(['left', 'right']).optional(),
  side: z.enum(['left', 'right']).optional(),
  width: z.number(),
  height: z.number(),
  landmarks: z.record(z.string(), PointSchema),
  plumbLine: z.object({ top: PointSchema, bottom: PointSchema }),
  scale: z.object({ from: PointSchema, to: PointSchema, lengthMm: z.number() }),
  values: z.record(z.string(), z.number()),
})
export type Truth = z.infer<typeof TruthSchema>
const TRUTHS = z.record(z.string(), z.object({ frames: z.number(), stills: z.record(z.string(), TruthSchema) })).parse(JSON.parse(readFileSync(new URL('truth.json', DEMO), 'utf8')))

export interface DemoFigure { file: string, path: string, frame: number, truth: Truth }

/** @returns a demo clip with the frame whose pose is known exactly. */
export function demoFigure(file: string): DemoFigure {
  const [frame, truth] = Object.entries(TRUTHS[file]?.stills ?? {})[0] ?? []
  if (frame === undefined || truth === undefined) throw new Error(`no truth of ${file}`)
  return { file, path: fileURLToPath(new URL(`clips/${file}`, DEMO)), frame: Number(frame), truth }
}

const textsOf = (tree: object, path: string): unknown => path.split('.').reduce<unknown>((found, key) => typeof found === 'object' && found !== null ? Reflect.get(found, key) : undefined, tree)
function wordOf(tree: object, ...paths: string[]): string {
  const found = paths.map(path => textsOf(tree, path)).find(text => typeof text === 'string')
  if (typeof found !== 'string') throw new Error(`no text ${paths.join(' or ')}`)
  return found
}
export const landmarkName = (id: string): string => wordOf(landmarkTexts, `landmark.${id}.name`)
/** What the bench calls a measure. */
export const measureName = (id: string): string => textsOf(markingTexts, `marking.map.short.${id}`) === undefined ? wordOf(measureTexts, `measure.${id}.short`) : wordOf(markingTexts, `marking.map.short.${id}`)

/** How far an angle that is measured through the interface may be from the one that was drawn, degrees. */
export const TOLERANCE_DEG = 0.1

const keyOf = (reading: { measure: string, side?: string | undefined }) => reading.measure === 'frontalKneeAngle' ? `${reading.measure}.${reading.side}` : reading.measure

/** @returns the readings in degrees, each with what was drawn. At least five must be there, or the figure was not marked. */
export function angles(readings: readonly ReadingJson[], truth: Truth): { key: string, reading: ReadingJson, drawn: number }[] {
  const found = readings.filter(reading => reading.unit === 'deg').map(reading => ({ key: keyOf(reading), reading, drawn: truth.values[keyOf(reading)] ?? Number.NaN }))
  expect(found.length).toBeGreaterThanOrEqual(5)
  return found
}

/** The stored readings are the drawn angles. */
export function expectStoredAngles(marking: Marking, truth: Truth): void {
  const off = angles(marking.readings, truth).filter(({ reading, drawn }) => !(Math.abs(reading.value - drawn) <= TOLERANCE_DEG))
  expect(off.map(({ key, reading, drawn }) => `${key}: ${reading.value} instead of ${drawn}`)).toEqual([])
}

/**
 * The readings on the screen are the drawn angles. What is shown is rounded to what the band supports, so it must be what
 * some angle within the tolerance of the drawn one would show.
 */
export async function expectShownAngles(bench: Bench, marking: Marking, truth: Truth): Promise<void> {
  await bench.tab('Readings')
  for (const { key, reading, drawn } of angles(marking.readings, truth)) {
    const texts = [drawn - TOLERANCE_DEG, drawn, drawn + TOLERANCE_DEG].map(value => formatReading(value, reading.sd, 'deg').text)
    const name = measureName(reading.measure)
    expect(texts, key).toContain(await bench.reading(reading.measure === 'frontalKneeAngle' ? new RegExp(`^${name}, `) : name, reading.side === 'right' && reading.measure === 'frontalKneeAngle' ? 1 : 0))
  }
}

/** The newest version of the one marking of a still, as the server keeps it. */
export async function storedMarking(by: Person, stillId: string): Promise<Marking> {
  const { items } = expectBody(await by.client.get(`/api/stills/${stillId}/markings`), 200, MarkingsSchema)
  expect(items).toHaveLength(1)
  const [marking] = items
  if (!marking) throw new Error('nothing is stored')
  return marking
}
