import { readdirSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Knex } from 'knex'
import { emptySheet } from '../../shared/schemas/setups'
import { makeClient, type Client } from '../../seeds/client'
import { addMember, connect } from '../support/database'
import { describedPath, differences, readDocument, type ApiDocument } from '../support/described'
import {
  baseUrl, fixture, fixtureLines, garage, lapsOf, makeToken, register, saveLines, uploadAndRead,
  type Garage, type Registered,
} from '../support/team'

/** Who asks. `other` is signed in and the owner of another team. */
const ASKERS = ['nobody', 'other', 'coach', 'crew', 'driver', 'owner'] as const
type Asker = (typeof ASKERS)[number]

interface Case {
  /** May make something first that is then removed. */
  path: (of: Team) => string | Promise<string>
  body?: (of: Team) => unknown
  /** Status by asker; `yes` is any 2xx. */
  expected: Record<Asker, number | 'yes'>
}

interface Team extends Garage { logId: string, lapIds: [string, string] }

const ALL = { nobody: 'yes', other: 'yes', coach: 'yes', crew: 'yes', driver: 'yes', owner: 'yes' } as const
const SIGNED_IN = { ...ALL, nobody: 401 } as const
/** Absent and not yours are the same: 404. */
const READ = { ...SIGNED_IN, other: 404 } as const
const WRITE = { ...READ, coach: 403, crew: 403 } as const
const CREW = { ...READ, coach: 403 } as const

const outing = (of: Garage) => ({ layoutId: of.layoutId, carId: of.carId, setupId: of.setupId, driverId: of.me.id })
const unique = () => `Name ${Math.random().toString(36).slice(2)}`

/** A body for a sheet as it stands at this moment. */
async function based(of: Team, path: string, body: object): Promise<object> {
  const { version } = await of.client.must<{ version: number }>('GET', path)
  return { ...body, basedOnVersion: version }
}

/** The path of something that the owner has just made and nothing stands on. */
async function fresh(of: Team, what: string, path: string, body: object): Promise<string> {
  const { id } = await of.client.must<{ id: string }>('POST', path, body)
  return `/api/${what}/${id}`
}

/** The path of a log that has just been uploaded, its columns not yet confirmed. */
async function freshLog(of: Team): Promise<string> {
  const file = `# ${randomUUID()}\n${fixture('short-loop.csv').toString()}`
  const { body } = await of.client.upload<{ id: string }>(`/api/outings/${of.outingId}/logs`, 'mistaken.csv', file)
  return `/api/logs/${body.id}`
}

/** Every route of server/api, with who may use it. A route that is missing here fails the test below. */
const ROUTES: Record<string, Case> = {
  'health.get': { path: () => '/api/health', expected: ALL },
  'register.post': { path: () => '/api/register', body: () => ({ name: 'N', email: `${unique().replace(' ', '')}@lapwright.example`, password: 'long enough password', teamName: 'T' }), expected: ALL },
  'sign-in.post': { path: () => '/api/sign-in', body: of => ({ email: of.email, password: 'a long enough password' }), expected: ALL },
  'sign-out.post': { path: () => '/api/sign-out', expected: ALL },
  'password.post': { path: () => '/api/password', body: () => ({ currentPassword: 'not it', newPassword: 'a long enough password' }), expected: { ...SIGNED_IN, other: 422, coach: 422, crew: 422, driver: 422, owner: 422 } },
  'me.get': { path: () => '/api/me', expected: SIGNED_IN },
  'me/preferences.put': { path: () => '/api/me/preferences', body: () => ({ units: 'metric', numberLanguage: 'en-GB', sheet: 'device' }), expected: SIGNED_IN },
  'openapi.json.get': { path: () => '/api/openapi.json', expected: ALL },
  'tokens/index.get': { path: () => '/api/tokens', expected: SIGNED_IN },
  'tokens/index.post': { path: () => '/api/tokens', body: () => ({ name: 'T', expiresInDays: 30, password: 'not it' }), expected: { ...SIGNED_IN, other: 422, coach: 422, crew: 422, driver: 422, owner: 422 } },
  // One of the owner's own: nobody else has it, whatever their role.
  'tokens/[id].delete': { path: async of => `/api/tokens/${(await makeToken(of)).id}`, expected: { ...READ, coach: 404, crew: 404, driver: 404 } },
  'demonstration.post': { path: of => `/api/demonstration?teamId=${of.teamId}`, expected: WRITE },
  'members.get': { path: of => `/api/members?teamId=${of.teamId}`, expected: READ },
  'circuits/index.get': { path: of => `/api/circuits?teamId=${of.teamId}`, expected: READ },
  'circuits/index.post': { path: of => `/api/circuits?teamId=${of.teamId}`, body: () => ({ name: unique(), timeZone: 'UTC' }), expected: WRITE },
  'circuits/[id].get': { path: of => `/api/circuits/${of.circuitId}`, expected: READ },
  'circuits/[id].put': { path: of => `/api/circuits/${of.circuitId}`, body: of => based(of, `/api/circuits/${of.circuitId}`, { name: unique(), timeZone: 'UTC' }), expected: WRITE },
  'circuits/[id].delete': { path: of => fresh(of, 'circuits', `/api/circuits?teamId=${of.teamId}`, { name: unique(), timeZone: 'UTC' }), expected: WRITE },
  'circuits/[id]/layouts.post': { path: of => `/api/circuits/${of.circuitId}/layouts`, body: () => ({ name: unique() }), expected: WRITE },
  'layouts/index.get': { path: of => `/api/layouts?teamId=${of.teamId}`, expected: READ },
  'layouts/[id].get': { path: of => `/api/layouts/${of.layoutId}`, expected: READ },
  'layouts/[id].put': { path: of => `/api/layouts/${of.layoutId}`, body: of => based(of, `/api/layouts/${of.layoutId}`, { name: unique() }), expected: WRITE },
  'layouts/[id].delete': { path: of => fresh(of, 'layouts', `/api/circuits/${of.circuitId}/layouts`, { name: unique() }), expected: WRITE },
  'layouts/[id]/logs.get': { path: of => `/api/layouts/${of.layoutId}/logs`, expected: READ },
  // An old version, so that nobody's try changes what the next one meets.
  'layouts/[id]/lines.put': { path: of => `/api/layouts/${of.layoutId}/lines`, body: () => ({ basedOnVersion: 0, lines: [] }), expected: { ...WRITE, driver: 409, owner: 409 } },
  'layouts/[id]/line-trials.post': { path: of => `/api/layouts/${of.layoutId}/line-trials`, body: of => ({ logId: of.logId, lines: fixtureLines('harrow-fell-lines.geojson') }), expected: READ },
  'cars/index.get': { path: of => `/api/cars?teamId=${of.teamId}`, expected: READ },
  'cars/index.post': { path: of => `/api/cars?teamId=${of.teamId}`, body: () => ({ name: unique() }), expected: WRITE },
  'cars/[id].get': { path: of => `/api/cars/${of.carId}`, expected: READ },
  'cars/[id].put': { path: of => `/api/cars/${of.carId}`, body: of => based(of, `/api/cars/${of.carId}`, { name: unique() }), expected: WRITE },
  'cars/[id].delete': { path: of => fresh(of, 'cars', `/api/cars?teamId=${of.teamId}`, { name: unique() }), expected: WRITE },
  'cars/[id]/setups.post': { path: of => `/api/cars/${of.carId}/setups`, body: () => ({ name: 'Another', sheet: emptySheet() }), expected: CREW },
  'setups/[id].get': { path: of => `/api/setups/${of.setupId}`, expected: READ },
  'setups/[id].delete': { path: of => fresh(of, 'setups', `/api/cars/${of.carId}/setups`, { name: 'Mistaken', sheet: emptySheet() }), expected: CREW },
  'days/index.get': { path: of => `/api/days?teamId=${of.teamId}`, expected: READ },
  'days/index.post': { path: of => `/api/days?teamId=${of.teamId}`, body: of => ({ circuitId: of.circuitId, date: '2026-10-03' }), expected: WRITE },
  'days/[id].get': { path: of => `/api/days/${of.dayId}`, expected: READ },
  'days/[id].put': { path: of => `/api/days/${of.dayId}`, body: of => based(of, `/api/days/${of.dayId}`, { circuitId: of.circuitId, date: '2026-09-12' }), expected: WRITE },
  'days/[id].delete': { path: of => fresh(of, 'days', `/api/days?teamId=${of.teamId}`, { circuitId: of.circuitId, date: '2026-10-04' }), expected: WRITE },
  'days/[id]/outings.post': { path: of => `/api/days/${of.dayId}/outings`, body: outing, expected: CREW },
  'outings/[id].get': { path: of => `/api/outings/${of.outingId}`, expected: READ },
  'outings/[id].put': { path: of => `/api/outings/${of.outingId}`, body: of => based(of, `/api/outings/${of.outingId}`, outing(of)), expected: CREW },
  'outings/[id].delete': { path: of => fresh(of, 'outings', `/api/days/${of.dayId}/outings`, outing(of)), expected: CREW },
  // JSON is no upload: whoever may upload is told so.
  'outings/[id]/logs.post': { path: of => `/api/outings/${of.outingId}/logs`, body: () => ({}), expected: { ...CREW, crew: 415, driver: 415, owner: 415 } },
  'logs/[id].get': { path: of => `/api/logs/${of.logId}`, expected: READ },
  'logs/[id]/columns.put': { path: of => `/api/logs/${of.logId}/columns`, body: () => ({ columns: [{ index: 0, source: 'x', channel: 'time', unit: 's' }, { index: 1, source: 'y', channel: 'latitude', unit: '°' }, { index: 2, source: 'z', channel: 'longitude', unit: '°' }] }), expected: { ...CREW, crew: 422, driver: 422, owner: 422 } },
  'logs/[id]/events.get': { path: of => `/api/logs/${of.logId}/events`, expected: READ },
  'logs/[id]/trace.get': { path: of => `/api/logs/${of.logId}/trace`, expected: READ },
  'laps/index.get': { path: of => `/api/laps?teamId=${of.teamId}&layoutId=${of.layoutId}`, expected: READ },
  'laps/[id].patch': { path: of => `/api/laps/${of.lapIds[0]}`, body: () => ({ excluded: false }), expected: WRITE },
  'compare.get': { path: of => `/api/compare?lap=${of.lapIds[0]}&against=${of.lapIds[1]}`, expected: READ },
  '[...]': { path: () => '/api/nothing-here', expected: { nobody: 404, other: 404, coach: 404, crew: 404, driver: 404, owner: 404 } },
  'logs/[id].delete': { path: freshLog, expected: CREW },
}

let owner: Knex
let document: ApiDocument
let team: Team
/** By cookie and by token: what one may, the other may. A stranger has neither. */
const clients = {} as Record<Asker, { way: string, make: () => Client }[]>

async function waysOf(person: Registered): Promise<{ way: string, make: () => Client }[]> {
  const { token } = await makeToken(person)
  return [
    { way: 'by cookie', make: () => makeClient(baseUrl(), person.client.cookie()) },
    { way: 'by token', make: () => makeClient(baseUrl(), '', token) },
  ]
}

beforeAll(async () => {
  owner = connect('owner')
  document = await readDocument()
  const made = await garage()
  await saveLines(made, fixtureLines('harrow-fell-lines.geojson'))
  const log = await uploadAndRead(made, made.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  const [first, second] = (await lapsOf(made, made.outingId)).filter(lap => lap.kind === 'timed')
  team = { ...made, logId: log.id, lapIds: [first!.id, second!.id] }
  clients.nobody = [{ way: '', make: () => makeClient(baseUrl()) }]
  clients.other = await waysOf(await garage())
  clients.owner = await waysOf(made)
  for (const role of ['coach', 'crew', 'driver'] as const) {
    const member = await register(`A ${role}`)
    await addMember(owner, team.teamId, member.me.id, role)
    clients[role] = await waysOf(member)
  }
})

afterAll(() => owner.destroy())

async function answerOf(client: Client, method: string, path: string, body: unknown) {
  if (!path.endsWith('/events')) return client.send(method, path, body)
  // A stream has no end; its head tells.
  const stop = new AbortController()
  const response = await fetch(baseUrl() + path, { headers: client.credentials(), signal: stop.signal })
  stop.abort()
  return { status: response.status, body: '' }
}

/** What is wrong with a good answer, by the description of the interface. */
function faultsOf(name: string, answer: { status: number, body: unknown }): string[] {
  if (answer.status >= 300) return []
  const { method, path } = describedPath(name)
  return differences(document.paths[path]![method]!, answer)
}

describe('who may use which route', () => {
  it('is said for every route there is', () => {
    const folder = fileURLToPath(new URL('../../server/api', import.meta.url))
    const files = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts')).map(name => name.replace(/\.ts$/, ''))
    expect(files.sort()).toEqual(Object.keys(ROUTES).sort())
  })

  it.each(Object.entries(ROUTES))('%s', async (name, route) => {
    const method = name === '[...]' ? 'GET' : name.split('.').at(-1)!.toUpperCase()
    for (const asker of ASKERS) {
      const expected = route.expected[asker]
      for (const { way, make } of clients[asker]) {
        const answer = await answerOf(make(), method, await route.path(team), await route.body?.(team))
        const { status } = answer
        const asked = `${asker} ${way} ${name}`
        if (expected === 'yes') expect(status, asked).toSatisfy((found: number) => found >= 200 && found < 300)
        else expect(status, asked).toBe(expected)
        expect(faultsOf(name, answer), asked).toEqual([])
      }
    }
  })

  it('never takes a team that the person is not in, whatever else is right', async () => {
    const stranger = await garage()
    const { status } = await stranger.client.send('POST', `/api/days/${stranger.dayId}/outings`, { ...outing(stranger), carId: team.carId, setupId: team.setupId })
    expect(status).toBe(422)
    expect((await stranger.client.send('POST', `/api/layouts/${stranger.layoutId}/line-trials`, { logId: team.logId, lines: fixtureLines('harrow-fell-lines.geojson') })).status).toBe(404)
    expect((await stranger.client.send('GET', `/api/days?teamId=${team.teamId}`)).status).toBe(404)
    expect((await stranger.client.send('GET', '/api/days?teamId=nonsense')).status).toBe(400)
  })

  it('answers an unknown route, or a known one asked wrongly, with a problem', async () => {
    for (const [method, path] of [['GET', '/api/nothing-here'], ['DELETE', '/api/me']] as const) {
      const { status, headers } = await makeClient(baseUrl()).send(method, path)
      expect([status, headers.get('content-type')]).toEqual([404, 'application/problem+json'])
    }
  })
})
