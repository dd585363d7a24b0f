import { Ajv2020, type ErrorObject } from 'ajv/dist/2020.js'
import addFormats from 'ajv-formats'
import { makeClient } from '../../seeds/client'
import { baseUrl } from './team'

export interface Operation {
  operationId: string
  security: unknown[]
  parameters: { name: string, in: 'path' | 'query', required: boolean, schema: object }[]
  requestBody?: { content: Record<string, { schema: object }> }
  responses: Record<string, { content?: Record<string, { schema: object }> }>
}
export interface ApiDocument { paths: Record<string, Record<string, Operation>>, components: object }

/** The description of the interface by the server under test. */
export function readDocument(): Promise<ApiDocument> {
  return makeClient(baseUrl()).must<ApiDocument>('GET', '/api/openapi.json')
}

/** Method and path, in the words of the document, of a file of server/api without its ending. */
export function describedPath(routeFile: string): { method: string, path: string } {
  const [, path, method] = /^(.*)\.(get|post|put|patch|delete)$/.exec(routeFile)!
  return { method: method!, path: `/api/${path!.replace(/(^|\/)index$/, '').replace(/\[(\w+)\]/g, '{$1}')}` }
}

const ajv = addFormats.default(new Ajv2020({ strict: false, allErrors: true }))

/** In what a good answer differs from what its operation promises: status, whether there is a body, every property. */
export function differences({ responses }: Operation, { status, body }: { status: number, body: unknown }): string[] {
  const promised = responses[String(status)]
  if (!promised) return [`status ${status} is not described`]
  const schema = promised.content?.['application/json']?.schema
  if (!schema) return promised.content || body === '' ? [] : ['there is a body, and none is described']
  const fits = ajv.compile(schema)
  return fits(body) ? [] : fits.errors!.map((error: ErrorObject) => `${error.instancePath} ${error.message} ${JSON.stringify(error.params)}`)
}
