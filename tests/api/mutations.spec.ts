import { createHash, randomUUID } from 'node:crypto'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { emptySheet } from '../../shared/schemas/setups'
import { connect } from '../support/database'
import { readDocument, type Operation } from '../support/described'
import { mutatedRequests, rightRequest, type Ground, type Request } from '../support/mutate'
import { newNetwork } from '../support/network'
import { baseUrl, PASSWORD } from '../support/team'
import { filledTeam, identifiersOf, makeSpare, mark, type FilledTeam } from '../support/two-teams'

/**
 * Requests that are wrong in one to three places, to every operation of the description, as the owner of one team
 * beside another. The server may refuse them as it likes, but never with a fault of its own, and never with a word of
 * the other team. LAPWRIGHT_TEST_SEED asks others than the usual ones, LAPWRIGHT_TEST_MUTATIONS more or fewer of them.
 */
const SEED = Number(process.env.LAPWRIGHT_TEST_SEED ?? 20261201)
const COUNT = Number(process.env.LAPWRIGHT_TEST_MUTATIONS ?? 500)
const AT_ONCE = 8
/** So many requests, then the counters of passwords and uploads are set back, or these alone would be asked. */
const BATCH = 40
const SPARE = 12

/** Stand in a request for what must be another one each time, or is known only when it is sent. */
const UNIQUE = 'unique-to-this-request'
const VERSION = 1_000_001

const UUID = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/gi
const marker = `m${randomUUID().replaceAll('-', '')}`
const network = newNetwork()
const { paths } = await readDocument()
const operations = Object.entries(paths).flatMap(([path, methods]) => Object.entries(methods)
  .map(([method, operation]) => ({ path, method: method.toUpperCase(), operation })))
type Described = (typeof operations)[number]

let owner: Knex
let own: FilledTeam
let other: FilledTeam
let foreign: string[]
let spare: Record<string, string[]>

beforeAll(async () => {
  owner = connect('owner')
  other = await filledTeam()
  await mark(other, marker)
  foreign = await identifiersOf(other)
  own = await filledTeam()
  spare = await makeSpare(own, SPARE)
}, 120_000)

afterAll(() => owner.destroy())

/** The subject of a path. What is written or removed is a spare one, so that the log and its laps stay. */
function subject({ path, method }: Described): string {
  const [, , what] = path.split('/') as [string, string, keyof typeof spare]
  const kept: Record<string, string> = {
    circuits: own.circuitId, layouts: own.layoutId, cars: own.carId, setups: own.setupId, days: own.dayId,
    outings: own.outingId, logs: own.logId, laps: own.lapIds[0]!,
  }
  if (method === 'DELETE') return spare[what]!.length > 1 ? spare[what]!.pop()! : randomUUID()
  const writes = method === 'PUT' || (method === 'POST' && what === 'outings')
  // The first one is never removed.
  const written = writes && ['layouts', 'outings', 'logs'].includes(what) ? spare[what]![0] : undefined
  return written ?? kept[what] ?? randomUUID()
}

async function columnsOf(logId: string): Promise<object> {
  const { preview } = await own.client.must<{ preview: { columns: Record<string, unknown>[] } }>('GET', `/api/logs/${logId}`)
  return { columns: preview.columns.map(({ index, source, channel, unit }) => ({ index, source, channel, unit })) }
}

async function groundOf(described: Described): Promise<Ground> {
  const columns = described.path.endsWith('/columns') ? await columnsOf(subject(described)) : undefined
  const within: Record<string, unknown> = {
    teamId: own.teamId, circuitId: own.circuitId, layoutId: own.layoutId, carId: own.carId, setupId: own.setupId,
    driverId: own.me.id, logId: own.logId, lap: own.lapIds[0], against: own.lapIds[1], cursor: `2027-01-01,${own.dayId}`, withLog: randomUUID(),
    basedOnVersion: VERSION, name: UNIQUE, timeZone: 'UTC', teamName: 'Another', basedOnId: own.setupId, sheet: emptySheet(),
    email: `${UNIQUE}@lapwright.example`, newPassword: PASSWORD, currentPassword: 'not it', password: PASSWORD,
    startedAt: '2026-09-12T09:00:00Z', lines: LINES,
  }
  if (described.path === '/api/sign-in') within.email = own.email
  // There it is a setup; here paper or dark.
  if (described.path === '/api/me/preferences') within.sheet = undefined
  const { operationId } = described.operation
  if (columns) within[operationId] = columns
  // Asked anew for each request: what is removed is another one each time.
  return { foreign, known: (name, where) => where === 'path' ? subject(described) : within[name] }
}

const point = (latitudeDeg: number, longitudeDeg: number) => ({ latitudeDeg, longitudeDeg })
const LINES = [
  { kind: 'start_finish', ordinal: 0, a: point(54.401919157, -2.912997806), b: point(54.402080843, -2.913002194) },
  { kind: 'sector', ordinal: 1, a: point(54.40629244, -2.916828672), b: point(54.406186057, -2.917037438) },
]

function asText(value: unknown): string {
  return (typeof value === 'string' ? value : JSON.stringify(value) ?? '').toWellFormed()
}

/** Text for an address; what a browser would never send as it is, is sent as it is. */
function inAddress(value: unknown): string {
  const text = asText(value)
  return text === '%00' ? text : encodeURIComponent(text.slice(0, 4000).toWellFormed())
}

function addressOf(path: string, request: Request): string {
  const query = Object.entries(request.query).flatMap(([name, value]) =>
    (Array.isArray(value) ? value : [value]).map(each => `${inAddress(name)}=${inAddress(each)}`))
  return baseUrl() + path.replace(/\{(\w+)\}/g, (_, name: string) => inAddress(request.path[name])) + (query.length ? `?${query.join('&')}` : '')
}

function bodyOf({ body, form }: Request): { body?: string | FormData, type?: string } {
  if (form) {
    const sent = new FormData()
    sent.append(asText(form.part), new Blob([asText(form.text)]), asText(form.fileName))
    return { body: sent }
  }
  const text = JSON.stringify(body)
  // Beyond the limit of a body longer means the same.
  return text === undefined ? {} : { body: text.slice(0, 1_200_000), type: 'application/json' }
}

let sentSoFar = 0

async function send({ path, method }: Described, request: Request, version: number) {
  const { body, type } = bodyOf(request)
  const fill = (text: string) => text.replaceAll(UNIQUE, `n${sentSoFar}x${marker.length}`).replaceAll(String(VERSION), String(version))
  sentSoFar++
  const url = addressOf(path, request)
  const sent = typeof body === 'string' ? fill(body) : body
  const stop = new AbortController()
  const response = await fetch(url, {
    method, body: sent, signal: stop.signal, redirect: 'manual',
    headers: {
      'authorization': `Bearer ${own.token}`, 'x-forwarded-for': network.address,
      ...(type ? { 'content-type': type } : {}),
    },
  })
  const events = response.headers.get('content-type')?.startsWith('text/event-stream')
  const text = events ? await firstOf(response, stop) : await response.text()
  return { status: response.status, text, said: `${url} ${typeof sent === 'string' ? sent : JSON.stringify(request.form ?? '')}` }
}

/** A stream has no end: its first event tells. */
async function firstOf(response: Response, stop: AbortController): Promise<string> {
  const reader = response.body!.getReader()
  const { value } = await reader.read()
  stop.abort()
  await reader.closed.catch(() => undefined)
  return Buffer.from(value ?? []).toString()
}

function faultOf({ status, text, said }: Awaited<ReturnType<typeof send>>): string | null {
  const asked = said.toLowerCase()
  const told = (text.match(UUID) ?? []).map(id => id.toLowerCase())
  const leaked = told.find(id => foreign.includes(id) && !asked.includes(id))
  if (status < 500 && !leaked && !text.includes(marker)) return null
  return `${status} ${leaked ? `told ${leaked}` : ''} to ${said.slice(0, 600)}: ${text.slice(0, 300)}`
}

async function setBackCounters(): Promise<void> {
  const person = createHash('sha256').update(own.email).digest('hex')
  await owner.withSchema('app').from('attempts').whereIn('key', [`person:${person}`, network.key, `upload:${own.teamId}`]).delete()
}

/** The version on which a change is based, as it is before a batch: what succeeds first makes the others of it old. */
async function versionOf({ path, method, operation }: Described, ground: Ground): Promise<number> {
  if (method !== 'PUT' || !JSON.stringify(operation.requestBody ?? {}).includes('basedOnVersion')) return 1
  const ofLines = path.endsWith('/lines')
  const address = path.replace(/\/lines$/, '').replace('{id}', String(ground.known('id', 'path')))
  const sheet = await own.client.must<{ version: number, linesVersion: number }>('GET', address)
  return ofLines ? sheet.linesVersion : sheet.version
}

async function askAll(described: Described, ground: Ground, requests: readonly Request[]) {
  const answers: Awaited<ReturnType<typeof send>>[] = []
  for (let from = 0; from < requests.length; from += BATCH) {
    await setBackCounters()
    const version = await versionOf(described, ground)
    const batch = requests.slice(from, from + BATCH).values()
    await Promise.all(Array.from({ length: AT_ONCE }, async () => {
      for (const request of batch) answers.push(await send(described, request, version))
    }))
  }
  return answers
}

describe('mutated requests', () => {
  it.each(operations.map(each => [each.operation.operationId, each] as const))('%s', { timeout: 120_000 }, async (_, described) => {
    const ground = await groundOf(described)
    const [right] = await askAll(described, ground, [rightRequest(described.operation, ground)])
    // Wrong in one place tells only where the rest is right.
    if (described.path !== '/api/password') expect(right!.status, right!.said + right!.text).toBeLessThan(300)
    const requests = mutatedRequests(described.operation as Operation, ground, { seed: SEED, count: COUNT })
    const answers = await askAll(described, ground, requests)
    expect(answers).toHaveLength(COUNT)
    expect(answers.map(faultOf).filter(Boolean)).toEqual([])
  })

  it('have left the other team as it was', async () => {
    expect(await identifiersOf(other)).toEqual(foreign)
    const { name } = await other.client.must<{ name: string }>('GET', `/api/cars/${other.carId}`)
    expect(name).toBe(`${marker} car`)
  })
})
