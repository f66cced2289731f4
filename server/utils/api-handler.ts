import { defineEventHandler, getQuery, getRequestHeader, getRouterParams, setResponseHeader, setResponseStatus, type EventHandler, type H3Event } from 'h3'
import type { z } from 'zod'
import type { Actor } from '#server/services/actor'
import { AppError, type AppErrorCode } from '#server/services/app-error'
import { IdSchema } from '#shared/schemas/common'
import { rolesMay, type Permission } from '#shared/schemas/permissions'
import { toApiError } from './api-error'
import { runOnce } from './idempotency'
import { readJsonBody } from './request-body'
import { readActor } from './session'

type Thing = AppErrorCode extends infer Code ? Code extends `${infer Word}-not-found` ? Word : never : never
type InferOr<Schema, Otherwise> = Schema extends z.ZodType ? z.output<Schema> : Otherwise
type ActorFor<Can> = Can extends 'public' ? null : Actor

export interface ApiDefinition<Can extends Permission | 'public' | 'signed-in', Param extends string, Query, Body, Response> {
  /** Who may call it. `public` must be written out; nothing is open by default. */
  can: Can
  /** Names the thing behind each path parameter: a malformed id answers 404 as an absent one does. */
  params?: Record<Param, Thing>
  query?: Query
  body?: Body
  /** What may leave; every other field is dropped. `none` answers 204, `stream` writes its own bytes. */
  response: Response
  status?: 200 | 201 | 202
  /** Needs `If-Match` (428 without) and hands its version to the handler. */
  ifMatch?: boolean
  /** The handler sets the status itself. */
  ownStatus?: boolean
}

/** What a route says of itself; the published interface is made of it (openapi.ts). */
export interface AnyApiDefinition {
  can: Permission | 'public' | 'signed-in'
  params?: Record<string, string>
  query?: z.ZodType | undefined
  body?: z.ZodType | undefined
  response: z.ZodType | 'none' | 'stream'
  status?: number
  ifMatch?: boolean
}

interface HandlerInput<Can, Param extends string, Query, Body> {
  event: H3Event
  actor: ActorFor<Can>
  params: Record<Param, string>
  query: InferOr<Query, undefined>
  body: InferOr<Body, undefined>
  version: number
}

function parse<Schema extends z.ZodType>(schema: Schema, value: unknown): z.output<Schema> {
  const result = schema.safeParse(value)
  if (result.success) return result.data
  throw new AppError('validation-failed', { issues: result.error.issues.slice(0, 50).map(issue => ({ path: issue.path.join('.'), message: issue.message })) })
}

function readParams<Param extends string>(event: H3Event, things: Record<Param, Thing> | undefined): Record<string, string> {
  const params = getRouterParams(event, { decode: true })
  for (const [name, thing] of Object.entries<Thing>(things ?? {})) {
    if (!IdSchema.safeParse(params[name]).success) throw new AppError(`${thing}-not-found`)
  }
  return params
}

/** @returns the version in `If-Match`: `3` and `"3"` mean the same. */
function readVersion(event: H3Event): number {
  const header = getRequestHeader(event, 'if-match')
  if (header === undefined) throw new AppError('version-required')
  const digits = /^\s*"?(\d{1,9})"?\s*$/.exec(header)?.[1]
  // A malformed tag fits no version, as an old one does not.
  return digits === undefined ? -1 : Number(digits)
}

async function admit(event: H3Event, can: Permission | 'public' | 'signed-in'): Promise<Actor | null> {
  if (can === 'public') return null
  const actor = await readActor(event)
  if (!actor) throw new AppError('not-signed-in')
  if (can !== 'signed-in' && !rolesMay(actor.roles, can)) throw new AppError('not-allowed')
  return actor
}

function answer(event: H3Event, response: z.ZodType | 'none' | 'stream', status: number | null, result: unknown): unknown {
  if (response === 'stream') return result
  if (response === 'none') {
    setResponseStatus(event, 204)
    return null
  }
  const body: unknown = response.parse(result)
  if (status !== null) setResponseStatus(event, status)
  if (body && typeof body === 'object' && 'version' in body && typeof body.version === 'number') setResponseHeader(event, 'ETag', `"${body.version}"`)
  return body
}

/** The present state that goes with a 412 passes through the same schema as an answer. */
function withCleanState(error: unknown, response: z.ZodType | 'none' | 'stream'): unknown {
  if (!(error instanceof AppError) || error.details.current === undefined || typeof response === 'string') return error
  return new AppError(error.code, { ...error.details, current: response.parse(error.details.current) })
}

/**
 * The only way to write a route: who, may they, is the input right; then the service; then what may leave.
 * Errors of any kind become the error JSON of the interface.
 */
export function defineApiHandler<
  const Can extends Permission | 'public' | 'signed-in',
  Param extends string = never,
  Query extends z.ZodType | undefined = undefined,
  Body extends z.ZodType | undefined = undefined,
  Response extends z.ZodType | 'none' | 'stream' = 'none',
>(
  definition: ApiDefinition<Can, Param, Query, Body, Response>,
  handle: (input: HandlerInput<Can, Param, Query, Body>) => Promise<unknown>,
): EventHandler & { apiDefinition: AnyApiDefinition } {
  const { can, params, query, body, response, status = 200, ifMatch = false, ownStatus = false } = definition
  const handler = defineEventHandler(async (event) => {
    try {
      const actor = await admit(event, can)
      const input = body ? await readJsonBody(event) : null
      const given = {
        event,
        actor,
        params: readParams(event, params),
        query: query ? parse(query, getQuery(event)) : undefined,
        body: body && input ? parse(body, input.value) : undefined,
        version: ifMatch ? readVersion(event) : 0,
      } as HandlerInput<Can, Param, Query, Body> // the generics above say what each branch holds
      const run = () => handle(given)
      const result = actor && status === 201 && input
        ? await runOnce(event, actor, { route: `${event.method} ${event.path.split('?')[0]}`, status, bytes: input.bytes }, run)
        : await run()
      return answer(event, response, ownStatus ? null : status, result)
    } catch (error) {
      throw toApiError(event, withCleanState(error, response))
    }
  })
  return Object.assign(handler, { apiDefinition: definition })
}
