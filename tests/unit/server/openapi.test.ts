import { describe, expect, it } from 'vitest'
import { contract } from '#shared/schemas/contract'
import { openApiDocument } from '#shared/schemas/openapi'

interface Operation { operationId: string, parameters: { name: string, in: string, required: boolean, schema: object }[], requestBody?: { content: Record<string, { schema: { type?: string, properties?: object, required?: string[] } }> }, responses: Record<string, { content?: object }>, security: object[] }
const document = openApiDocument(contract, '1.2.3') as { openapi: string, info: object, paths: Record<string, Record<string, Operation>>, components: { schemas: { Error: { required: string[] } } } }

// Expected shapes: OpenAPI 3.1.1, clauses 4.8.8 to 4.8.17 (paths, operations, parameters, bodies, responses).
describe('the OpenAPI document', () => {
  it('has an operation for every row of the contract, each with an id of its own', () => {
    expect(document.openapi).toBe('3.1.1')
    const operations = Object.values(document.paths).flatMap(methods => Object.values(methods))
    expect(operations.map(o => o.operationId).sort()).toEqual(Object.keys(contract).sort())
  })
  it('names every parameter of a path, and those of the query with their schemas', () => {
    for (const [path, methods] of Object.entries(document.paths)) {
      const names = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name)
      for (const { parameters } of Object.values(methods)) expect(parameters.filter(p => p.in === 'path').map(p => p.name)).toEqual(names)
    }
    const { parameters } = document.paths['/api/studios/{studio}/benches']!.get!
    expect(parameters.find(p => p.name === 'limit')).toMatchObject({ in: 'query', required: false, schema: { maximum: 100, minimum: 1 } })
  })
  it('describes bodies as they are sent, and other bodies by media type', () => {
    const { requestBody } = document.paths['/api/studios/{studio}/benches/{bench}/readings']!.post!
    expect(Object.keys(requestBody!.content).sort()).toEqual(['application/json', 'multipart/form-data', 'text/csv', 'text/plain'])
    expect(requestBody!.content['application/json']!.schema).toMatchObject({ type: 'object', required: ['unit', 'values'] })
  })
  it('names the shape of errors and who may call', () => {
    expect(document.components.schemas.Error.required).toEqual(['statusCode', 'statusMessage', 'message', 'data'])
    expect(document.paths['/api']!.get!.security).toEqual([])
    expect(document.paths['/api/me']!.get!.security).toEqual([{ session: [] }])
  })
  it('is plain JSON', () => {
    expect(JSON.parse(JSON.stringify(document))).toEqual(document)
  })
})
