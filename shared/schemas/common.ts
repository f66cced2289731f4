import { z } from 'zod'

/** UUIDv7 in its text form; anything else is not an id of ours. */
export const IdSchema = z.uuid()

/** A moment, ISO 8601 with a zone; kept and given back in UTC with milliseconds. */
export const MomentSchema = z.iso.datetime({ offset: true }).transform(text => new Date(text).toISOString())

/** A calendar day without a zone, `2026-11-27`. */
export const DaySchema = z.iso.date()

/** Side of the body, anatomical. */
export const SideSchema = z.enum(['left', 'right'])
export type Side = z.infer<typeof SideSchema>

/** True when the text holds what no person types and the database cannot keep: control characters other than tab and line break, half of a surrogate pair. */
function hasControlCharacter(text: string): boolean {
  return /\p{Surrogate}/u.test(text) || [...text].some(character => character < ' ' ? !'\t\r\n'.includes(character) : character === '\u007f')
}

/** One line of text typed by a person: trimmed, no control characters. */
export function lineText(max: number, min = 0) {
  return z.string().trim().min(min).max(max).refine(text => !hasControlCharacter(text) && !/[\r\n]/.test(text), { error: 'control-character' })
}

/** Several lines of text typed by a person. */
export function blockText(max: number) {
  return z.string().trim().max(max).refine(text => !hasControlCharacter(text), { error: 'control-character' })
}

/** Paging of every list: `page` from 1, `pageSize` 1 to 200. */
export const PageQuerySchema = z.strictObject({
  page: z.coerce.number().int().min(1).max(1_000_000).default(1),
  pageSize: z.coerce.number().int().min(1).max(200).default(50),
})

/** The answer of every list. */
export function listOf<Item extends z.ZodType>(item: Item) {
  return z.object({ items: z.array(item), total: z.number().int(), page: z.number().int(), pageSize: z.number().int() })
}
export interface ListOf<Item> { items: Item[], total: number, page: number, pageSize: number }

/** A sort word: a field of the list, with `-` before it for descending. */
export function sortBy<const Fields extends readonly [string, ...string[]]>(fields: Fields) {
  return z.string().refine(word => fields.includes(word.replace(/^-/, '')), { error: `sort must be one of ${fields.join(', ')}` })
}
