import { afterAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { createClient } from '../fixtures/api/client'
import { closeDatabase } from '../fixtures/api/database'
import { makeClinic, makeTherapist } from '../fixtures/api/people'
import { makePatient, patientBody } from '../fixtures/api/records'

afterAll(closeDatabase)

const SchemaSchema = z.record(z.string(), z.unknown())
const OperationSchema = z.object({
  description: z.string(),
  security: z.array(z.unknown()).optional(),
  parameters: z.array(z.object({ name: z.string(), in: z.enum(['path', 'query', 'header']), required: z.boolean(), schema: SchemaSchema })),
  requestBody: z.object({ content: z.object({ 'application/json': z.object({ schema: SchemaSchema }) }) }).optional(),
  responses: z.record(z.string(), z.object({ content: z.record(z.string(), z.object({ schema: SchemaSchema.optional() })).optional() })),
})
const DocumentSchema = z.object({
  openapi: z.string(),
  paths: z.record(z.string(), z.record(z.string(), OperationSchema)),
  components: z.object({ securitySchemes: z.object({ session: z.object({ type: z.literal('apiKey'), in: z.literal('cookie'), name: z.string() }) }), responses: z.record(z.string(), z.unknown()) }),
})

const answer = await createClient().get('/api/openapi.json')
const document = DocumentSchema.parse(answer.json)
const operation = (method: string, path: string) => OperationSchema.parse(document.paths[path]?.[method])
const namesIn = (method: string, path: string, place: string) => operation(method, path).parameters.filter(parameter => parameter.in === place).map(parameter => parameter.name)

describe('GET /api/openapi.json', () => {
  it('is OpenAPI 3.1 and open to everybody', () => {
    expect(answer.status).toBe(200)
    expect(document.openapi).toBe('3.1.0')
    expect(document.components.securitySchemes.session.name).toBe('standmark')
  })

  it('describes paths, queries and headers of a route', () => {
    expect(namesIn('get', '/api/patients', 'query').sort()).toEqual(['page', 'pageSize', 'search', 'sort'])
    expect(namesIn('delete', '/api/patients/{id}/care-team/{userId}', 'path')).toEqual(['id', 'userId'])
    expect(namesIn('patch', '/api/patients/{id}', 'header')).toEqual(['If-Match'])
    expect(namesIn('post', '/api/patients', 'header')).toEqual(['Idempotency-Key'])
    expect(operation('post', '/api/auth/sign-in').security).toEqual([])
    expect(operation('get', '/api/patients').security).toBeUndefined()
  })

  it('says the same as the server does: what it takes is required there, and what it answers is described', async () => {
    const therapist = await makeTherapist(await makeClinic('openapi'))
    const { requestBody, responses } = operation('post', '/api/patients')
    const input = z.object({ required: z.array(z.string()), properties: SchemaSchema, additionalProperties: z.literal(false) }).parse(requestBody?.content['application/json'].schema)
    for (const field of input.required) {
      const { [field]: _left, ...rest } = patientBody()
      expect((await therapist.client.post('/api/patients', rest)).status, field).toBe(400)
    }
    const output = z.object({ properties: SchemaSchema }).parse(responses['201']?.content?.['application/json']?.schema)
    expect(Object.keys(await makePatient(therapist)).sort()).toEqual(Object.keys(output.properties).sort())
  })

  it('lists the codes of all errors', () => {
    const text = JSON.stringify(document.components.responses.Error)
    for (const code of ['validation-failed (400)', 'not-signed-in (401)', 'cross-origin (403)', 'patient-not-found (404)', 'stale-version (412)', 'version-required (428)', 'too-many-attempts (429)', 'database-unavailable (503)']) expect(text).toContain(code)
  })

  it('refers to nothing that is not in it', () => {
    const references = [...answer.text.matchAll(/"\$ref":\s*"#\/([^"]+)"/g)].map(match => (match[1] ?? '').split('/'))
    expect(references.length).toBeGreaterThan(0)
    for (const steps of references) {
      let at: unknown = answer.json
      for (const step of steps) at = z.record(z.string(), z.unknown()).parse(at)[step]
      expect(at, steps.join('/')).toBeDefined()
    }
  })
})
