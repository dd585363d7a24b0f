import fc from 'fast-check'
import type { Operation } from './described'

/** A JSON Schema as far as the description of the interface uses it. */
interface Schema {
  type?: string | string[]
  const?: unknown
  enum?: unknown[]
  format?: string
  properties?: Record<string, Schema>
  items?: Schema
  anyOf?: Schema[]
  oneOf?: Schema[]
  default?: unknown
  minimum?: number
  maximum?: number
  minLength?: number
  maxLength?: number
}

/** What a request is made of; a form is that of an upload. */
export interface Request {
  path: Record<string, unknown>
  query: Record<string, unknown>
  body?: unknown
  form?: Upload
}
export interface Upload { part: string, fileName: string, text: string }

/** Values that are right where they stand: by name, as far as the schema alone does not tell. */
export type Known = (name: string, where: 'path' | 'query' | 'body') => unknown

export interface Ground {
  known: Known
  /** Identifiers of another team. */
  foreign: readonly string[]
}

const LOG_TEXT = 'time,latitude,longitude\n0,54.4,-2.9\n'

type Place = { keys: (string | number)[], schema: Schema }
interface Change { at: number, how: number, pick: number, text: string }

/** A request to which its operation says yes. */
export function rightRequest(operation: Operation, { known }: Ground): Request {
  const right: Request = { path: {}, query: {} }
  for (const { name, in: where, required, schema } of operation.parameters) {
    const value = known(name, where) ?? (required ? example(schema, name, known) : undefined)
    if (value !== undefined) right[where][name] = value
  }
  const content = operation.requestBody?.content ?? {}
  const json = content['application/json']?.schema
  if (json) right.body = known(operation.operationId, 'body') ?? example(json as Schema, '', known)
  if (content['multipart/form-data']) right.form = { part: 'file', fileName: 'a.csv', text: LOG_TEXT }
  return right
}

function example(schema: Schema, name: string, known: Known): unknown {
  const said = name ? known(name, 'body') : undefined
  if (said !== undefined) return said
  if (schema.const !== undefined) return schema.const
  if (schema.enum) return schema.enum[0]
  if (schema.default !== undefined) return schema.default
  const choices = schema.anyOf ?? schema.oneOf
  if (choices) return example(choices[0]!, name, known)
  if (schema.properties) {
    return Object.fromEntries(Object.entries(schema.properties).map(([key, each]) => [key, example(each, key, known)]))
  }
  if (schema.type === 'array') return []
  if (schema.type === 'boolean') return false
  if (schema.type === 'integer' || schema.type === 'number') {
    return Math.max(schema.minimum ?? 0, Math.min(schema.maximum ?? 1, 1))
  }
  if (schema.type === 'null') return null
  if (schema.format === 'date') return '2026-09-12'
  return 'abcdefghij'
}

/** So deep and so far along a list are nodes looked for: what a mutation blew up is not mutated leaf by leaf. */
const DEEPEST = 12
const FURTHEST = 3

/** The nodes of a value, with the schema that describes each. */
function placesOf(value: unknown, schema: Schema, keys: Place['keys'] = []): Place[] {
  const here = { keys, schema }
  if (typeof value !== 'object' || value === null || keys.length > DEEPEST) return [here]
  const within = (key: string) => [schema, ...schema.anyOf ?? [], ...schema.oneOf ?? []]
    .map(each => Array.isArray(value) ? each.items : each.properties?.[key]).find(Boolean) ?? {}
  const entries = Object.entries(Array.isArray(value) ? value.slice(0, FURTHEST) : value) as [string, unknown][]
  return [here, ...entries.flatMap(([key, each]) =>
    placesOf(each, within(key), [...keys, Array.isArray(value) ? Number(key) : key]))]
}

const ODD_TEXTS = [
  '', ' ', '\u0000', 'a\u0000b', '\uD800', 'x\uDFFFy', '\u202Eabc', '🏁'.repeat(40), 'é'.normalize('NFD'), '\uFEFF', '\u2028', '\\u0000',
  '\'; drop table laps; --', '%00', '../../etc', '{{7*7}}', '<b>', 'null', 'NaN', '1e400', '-0', 'true', '[]', '__proto__',
  '\r\nset-cookie: a=b',
]
const ODD_DATES = [
  '0000-01-01', '0001-01-01', '9999-12-31', '2024-02-29', '2023-02-29', '2026-13-01', '2026-9-1', '+010000-01-01', '-000001-01-01',
  '0000-01-01T00:00:00Z', '9999-12-31T23:59:59.999999999Z', '2026-01-01T00:00:00+24:00', '2026-01-01T00:00:00+14:00', '2026-06-30T23:59:60Z',
  '0001-01-01T00:00:00+14:00', '9999-12-31T23:59:59-12:00', '2026-01-01', '2026-01-01T24:00:00Z',
]
const ODD_NUMBERS = [
  0, -0, -1, 0.5, 1e-308, 1e308, -1e308, 2 ** 31 - 1, 2 ** 31, -(2 ** 31) - 1, 2 ** 53, 2 ** 63, 1e21,
  32_768, 0.1 + 0.2,
]
const WRONG_TYPES = [null, true, false, 7, 'seven', [], {}, [null], [[]], { a: { b: 1 } }, 1.5]
const EXTRA_KEYS = ['extra', '__proto__', 'constructor', 'id', 'team_id', 'teamId', 'toString', '', 'a.b', '\u0000']

const ODD_IDS = ['00000000-0000-0000-0000-000000000000', 'ffffffff-ffff-ffff-ffff-ffffffffffff', '{}', 'null']

function isIdentifier({ schema, keys }: Place): boolean {
  return schema.format === 'uuid' || /id$/i.test(String(keys.at(-1)))
}

const pickOf = <T>(from: readonly T[], pick: number): T => from[pick % from.length]!

/** The edges of what a schema takes, on both sides. */
function edges({ minimum, maximum, minLength, maxLength, enum: named, format }: Schema): unknown[] {
  const numbers = [minimum, maximum].flatMap(edge => edge === undefined ? [] : [edge, edge - 1, edge + 1, edge + 0.1])
  const texts = [minLength, maxLength].flatMap(edge => edge === undefined ? [] : [edge, edge - 1, edge + 1])
    .filter(length => length >= 0).flatMap(length => ['a'.repeat(length), 'é'.repeat(length)])
  const dates = format?.startsWith('date') ? ODD_DATES : []
  return [...numbers, ...texts, ...dates, ...named ?? []]
}

type Mutation = (old: unknown, place: Place, change: Change, ground: Ground) => unknown
export const GONE = Symbol('gone')

/** One way each in which a value comes out other than it was. */
const MUTATIONS: Mutation[] = [
  (old, { schema }, { pick }) => pickOf([...edges(schema), old], pick),
  (_, { schema }, { pick }) => pickOf([...edges(schema), ...ODD_NUMBERS], pick),
  (_, __, { pick }) => pickOf(WRONG_TYPES, pick),
  () => GONE,
  (_, __, { text }) => text,
  (_, __, { pick }) => pickOf(ODD_TEXTS, pick),
  (old, __, { pick }) => `${typeof old === 'string' ? old : ''}${pickOf(ODD_TEXTS, pick)}`,
  (_, __, { pick }) => pickOf(ODD_NUMBERS, pick),
  (_, __, { pick }) => pickOf(ODD_DATES, pick),
  (_, __, { pick }) => 'x'.repeat(pickOf([121, 201, 8001, 100_000], pick)),
  (old, __, { pick }) => Array.isArray(old) && old.length
    ? Array.from({ length: pickOf([2, 22, 401], pick) }, () => old[0] as unknown)
    : [old, old],
  (old, __, { pick, text }) => typeof old === 'object' && old !== null && !Array.isArray(old)
    ? Object.fromEntries([...Object.entries(old), [pickOf(EXTRA_KEYS, pick), text]])
    : { [pickOf(EXTRA_KEYS, pick)]: old },
  (old, __, { pick }) => Array.from({ length: pickOf([3, 500], pick) }).reduce<unknown>(inner => [inner], old),
  // Identifiers stand where identifiers belong, and in texts never: a text that is kept would come back rightly.
  (old, place, { pick }, { foreign }) => isIdentifier(place) ? pickOf(foreign, pick) : old,
  (old, place, { pick }, { foreign }) => isIdentifier(place) ? pickOf([...ODD_IDS, `${pickOf(foreign, pick)}x`], pick) : old,
]

function schemaOf({ parameters, requestBody }: Operation): Schema {
  const of = (where: 'path' | 'query') => ({
    properties: Object.fromEntries(parameters.filter(each => each.in === where)
      .map(({ name, schema }) => [name, schema as Schema])),
  })
  const body = requestBody?.content['application/json']?.schema ?? {}
  return { properties: { path: of('path'), query: of('query'), body } }
}

function changed(value: unknown, keys: Place['keys'], change: (old: unknown) => unknown): unknown {
  const [key, ...rest] = keys
  if (key === undefined) return change(value)
  if (typeof value !== 'object' || value === null) return value
  const copy = (Array.isArray(value) ? [...value] : { ...value }) as Record<string | number, unknown>
  const next = changed(copy[key], rest, change)
  if (next === GONE) Reflect.deleteProperty(copy, key)
  else copy[key] = next
  return copy
}

function apply(right: Request, operation: Operation, changes: readonly Change[], ground: Ground): Request {
  let request: unknown = right
  for (const change of changes) {
    const places = placesOf(request, schemaOf(operation)).filter(({ keys }) => keys.length > 1 || keys[0] === 'body')
    const place = pickOf(places, change.at)
    if (place) request = changed(request, place.keys, old => pickOf(MUTATIONS, change.how)(old, place, change, ground))
  }
  return request as Request
}

/** Mutated requests of an operation, the same for the same seed: one to three values each are not what they were. */
export function mutatedRequests(
  operation: Operation, ground: Ground, { seed, count }: { seed: number, count: number },
): Request[] {
  const natural = fc.nat({ max: 1_000_000 })
  const change = fc.record({ at: natural, how: natural, pick: natural, text: fc.string({ unit: 'binary', maxLength: 40 }) })
  const changes = fc.array(change, { minLength: 1, maxLength: 3, size: 'max' })
  return fc.sample(changes, { seed, numRuns: count })
    .map(each => apply(rightRequest(operation, ground), operation, each, ground))
}
