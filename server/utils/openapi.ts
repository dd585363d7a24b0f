import { z } from 'zod'
import { rolesThatMay } from '../../shared/access'
import { problemSchema } from '../../shared/schemas/common'
import type { Who } from './access'
import type { RouteDefinition } from './api'

export interface DescribedRoute {
  /** As Nitro names it, `/api/days/:id`. */
  path: string
  method: string
  route: RouteDefinition
}

type Json = Record<string, unknown>
interface ObjectSchema { properties?: Record<string, Json>, required?: string[] }

const PROBLEM = { $ref: '#/components/schemas/Problem' }

/**
 * The description of the interface by OpenAPI 3.1, from what the routes say of themselves.
 * @param version of the program
 * @see https://spec.openapis.org/oas/v3.1.0
 */
export function openApiDocument(routes: readonly DescribedRoute[], version: string): Json {
  const paths: Record<string, Json> = {}
  const sorted = [...routes].sort((a, b) => a.path.localeCompare(b.path) || a.method.localeCompare(b.method))
  for (const described of sorted) {
    const path = described.path.replace(/:(\w+)/g, '{$1}')
    paths[path] = { ...paths[path], [described.method]: operationOf(described) }
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Lapwright',
      version,
      description: 'Everything a person can do in Lapwright. SI units; instants as RFC 3339; missing values are null. '
        + 'Errors are problem details (RFC 9457).',
    },
    servers: [{ url: '/' }],
    paths,
    components: {
      schemas: { Problem: jsonSchema(problemSchema, 'output') },
      securitySchemes: {
        token: { type: 'http', scheme: 'bearer', description: 'A personal token, made on the account page.' },
        session: { type: 'apiKey', in: 'cookie', name: 'lapwright' },
      },
    },
  }
}

function operationOf({ path, method, route }: DescribedRoute): Json {
  return {
    operationId: operationId(path, method),
    tags: [path.split('/')[2]!],
    summary: route.about,
    description: whoMay(route.who),
    security: route.who === 'anyone' ? [] : [{ token: [] }, { session: [] }],
    parameters: [...parameters('path', route.params), ...parameters('query', route.query)],
    ...bodyOf(route),
    responses: { ...answerOf(route), default: { description: 'A problem: what, where, and what to do.', content: { 'application/problem+json': { schema: PROBLEM } } } },
  }
}

/** `get-days-id-outings`: words of the path, which no two routes share. */
function operationId(path: string, method: string): string {
  return [method, ...path.split(/[^\w.]+/).filter(word => word && word !== 'api')].join('-')
}

function whoMay(who: Who): string {
  if (who === 'anyone') return 'For anybody.'
  if (who === 'person') return 'For any person who is signed in, about themselves or within their teams.'
  return `For members of the team whose role is ${rolesThatMay(who.action).join(', ')}.`
}

function bodyOf({ takesFile, body }: RouteDefinition): Json {
  if (takesFile) {
    const file = { type: 'object', properties: { file: { type: 'string', format: 'binary' } }, required: ['file'] }
    return { requestBody: { required: true, content: { 'multipart/form-data': { schema: file } } } }
  }
  if (!body) return {}
  return { requestBody: { required: true, content: { 'application/json': { schema: jsonSchema(body, 'input') } } } }
}

function answerOf({ answer, status, elseStatus, sendsEvents }: RouteDefinition): Json {
  const code = String(status ?? (answer ? 200 : 204))
  if (!answer) return { [code]: { description: 'Done; there is nothing to tell.' } }
  const type = sendsEvents ? 'text/event-stream' : 'application/json'
  const content = { [type]: { schema: jsonSchema(answer, 'output') } }
  const other = elseStatus ? { [elseStatus]: { description: 'There was nothing to do.', content } } : {}
  return { ...other, [code]: { description: 'Done.', content } }
}

function parameters(where: 'path' | 'query', schema: z.ZodType | undefined): Json[] {
  if (!schema) return []
  const { properties = {}, required = [] } = jsonSchema(schema, 'input') as ObjectSchema
  return Object.entries(properties).map(([name, each]) =>
    ({ name, in: where, required: where === 'path' || required.includes(name), schema: each }))
}

/** JSON Schema 2020-12, which OpenAPI 3.1 takes as it is; what a transform makes of an input has no schema. */
function jsonSchema(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' })
  return rest
}
