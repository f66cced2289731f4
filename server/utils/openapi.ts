import { z } from 'zod'
import { listErrors } from '#server/services/app-error'
import { ApiErrorSchema } from '#shared/schemas/error'
import type { AnyApiDefinition } from './api-handler'

/** A route of the built server: its address with `:id` parameters, its method, what it says of itself. */
export interface DescribedRoute { path: string, method: string, definition: AnyApiDefinition }

type Json = Record<string, unknown>

function schemaOf(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _dialect, ...json } = z.toJSONSchema(schema, { io, unrepresentable: 'any', target: 'draft-2020-12' })
  return json
}

function queryParameters(query: z.ZodType | undefined): Json[] {
  if (!query) return []
  const { properties, required } = schemaOf(query, 'input')
  const names: unknown[] = Array.isArray(required) ? required : []
  return Object.entries(properties ?? {}).map(([name, schema]) => ({ name, in: 'query', required: names.includes(name), schema }))
}

function pathParameters(path: string): Json[] {
  return [...path.matchAll(/:(\w+)/g)].map(([, name]) => ({ name, in: 'path', required: true, schema: { type: 'string', format: 'uuid' } }))
}

function headerParameters({ ifMatch, status }: AnyApiDefinition): Json[] {
  return [
    ...(ifMatch ? [{ name: 'If-Match', in: 'header', required: true, schema: { type: 'string' }, description: 'The version that is being changed: 3 or "3"' }] : []),
    ...(status === 201 ? [{ name: 'Idempotency-Key', in: 'header', required: false, schema: { type: 'string', maxLength: 200 }, description: 'The same key and body gives the first answer again, for 24 hours' }] : []),
  ]
}

function success({ response, status = 200 }: AnyApiDefinition): Json {
  if (response === 'none') return { 204: { description: 'Done' } }
  if (response === 'stream') return { 200: { description: 'The bytes', content: { 'application/octet-stream': {} } } }
  return { [status]: { description: 'Done', content: { 'application/json': { schema: schemaOf(response, 'output') } } } }
}

function operation({ path, method, definition }: DescribedRoute): Json {
  return {
    operationId: `${method}${path.replace(/^\/api/, '').replace(/[/:.]+(\w)/g, (_, letter: string) => letter.toUpperCase())}`,
    description: definition.can === 'public' ? 'Open to everybody.' : definition.can === 'signed-in' ? 'For everybody who is signed in.' : `Needs the permission ${definition.can}.`,
    ...(definition.can === 'public' ? { security: [] } : {}),
    parameters: [...pathParameters(path), ...queryParameters(definition.query), ...headerParameters(definition)],
    ...(definition.body ? { requestBody: { required: true, content: { 'application/json': { schema: schemaOf(definition.body, 'input') } } } } : {}),
    responses: { ...success(definition), default: { $ref: '#/components/responses/Error' } },
  }
}

/** @returns the interface as OpenAPI 3.1, from the schemas that the routes themselves validate with. */
export function describeInterface(routes: readonly DescribedRoute[], cookieName: string): Json {
  const paths: Record<string, Json> = {}
  for (const route of [...routes].sort((a, b) => a.path.localeCompare(b.path))) {
    const path = route.path.replace(/:(\w+)/g, '{$1}')
    paths[path] = { ...paths[path], [route.method]: operation(route) }
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Standmark',
      version: '1',
      description: 'Ids are UUIDv7, times ISO 8601 in UTC, angles in degrees, masses in kilograms, lengths in millimetres, picture coordinates in pixels of the review copy. '
        + 'Standmark supports clinical judgement; it is not a diagnosis.',
    },
    security: [{ session: [] }],
    paths,
    components: {
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: cookieName } },
      responses: {
        Error: {
          description: `Error. Codes: ${listErrors().map(error => `${error.code} (${error.status})`).join(', ')}`,
          content: { 'application/json': { schema: schemaOf(ApiErrorSchema, 'output') } },
        },
      },
    },
  }
}
