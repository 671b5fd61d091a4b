import { z } from 'zod'
import type { AnswerShape, Endpoint } from './endpoint'
import { errorAnswer } from './primitives'

type Json = Record<string, unknown>

/**
 * The contract as an OpenAPI 3.1.1 document (openapis.org); its schemas are JSON Schema 2020-12, as zod writes them.
 * Bodies and queries are described as they are sent, answers as they come.
 */
export function openApiDocument(contract: Record<string, Endpoint>, version: string): Json {
  const paths: Record<string, Json> = {}
  for (const [name, row] of Object.entries(contract)) {
    const path = row.path.replaceAll(/:(\w+)/g, '{$1}')
    paths[path] = { ...paths[path], [row.method.toLowerCase()]: operationOf(name, row) }
  }
  return {
    openapi: '3.1.1',
    info: { title: 'Emulside', version },
    paths,
    components: {
      schemas: { Error: jsonSchema(errorAnswer, 'output') },
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'emulside' } },
    },
  }
}

function operationOf(operationId: string, row: Endpoint): Json {
  const answers = Object.entries(row.answers).map(([status, shape]) => [status, { description: `Status ${status}`, ...contentOf(shape) }])
  return {
    operationId, summary: row.summary,
    'x-access': row.access,
    'security': row.access === 'public' ? [] : [{ session: [] }],
    'parameters': [...pathParameters(row.path), ...queryParameters(row.query)],
    ...requestBody(row),
    'responses': { ...Object.fromEntries(answers), default: { description: 'Refused, and why', content: { 'application/json': { schema: { $ref: '#/components/schemas/Error' } } } } },
  }
}

const pathParameters = (path: string): Json[] => [...path.matchAll(/:(\w+)/g)].map(([, name]) => ({ name, in: 'path', required: true, schema: { type: 'string' } }))

function queryParameters(query: z.ZodType | undefined): Json[] {
  if (!query) return []
  const { properties = {}, required = [] } = jsonSchema(query, 'input') as { properties?: Json, required?: string[] }
  return Object.entries(properties).map(([name, schema]) => ({ name, in: 'query', required: required.includes(name), schema }))
}

function requestBody({ body, otherBodies = {} }: Endpoint): Json {
  const content: Json = Object.fromEntries(Object.entries(otherBodies).map(([type, description]) => [type, { schema: { type: 'string', description } }]))
  if (body) content['application/json'] = { schema: jsonSchema(body, 'input') }
  return Object.keys(content).length ? { requestBody: { required: true, content } } : {}
}

function contentOf(shape: AnswerShape): Json {
  if (shape === null) return {}
  if (shape instanceof z.ZodType) return { content: { 'application/json': { schema: jsonSchema(shape, 'output') } } }
  return { content: Object.fromEntries(shape.map(type => [type, {}])) }
}

function jsonSchema(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' })
  return rest
}
