import { randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import process from 'node:process'
import type { Layout, SavedLine } from '../../shared/schemas/circuits'
import type { Log, Outing } from '../../shared/schemas/days'
import type { Me } from '../../shared/schemas/people'
import { emptySheet } from '../../shared/schemas/setups'
import type { NewToken } from '../../shared/schemas/tokens'
import { makeClient, type Client } from '../../seeds/client'
import { uploadLog } from '../../seeds/upload'

export { confirmColumns, settled } from '../../seeds/upload'

export const PASSWORD = 'a long enough password'

/** Where the server under test is. */
export function baseUrl(): string {
  const url = process.env.LAPWRIGHT_TEST_URL
  if (!url) throw new Error('no server under test: run `npm test -- api`, or `npm test -- servers` in another terminal')
  return url
}

export interface Registered { client: Client, me: Me, teamId: string, email: string }

/** A new person, signed in, with a team of their own. */
export async function register(name = 'Nell Placeholder'): Promise<Registered> {
  const client = makeClient(baseUrl())
  const email = `${randomUUID()}@lapwright.example`
  const me = await client.must<Me>('POST', '/api/register', { name, email, password: PASSWORD, teamName: `Team of ${name}` })
  return { client, me, teamId: me.teams[0]!.id, email }
}

/** A token of this person, as the account page makes one. */
export function makeToken({ client }: Registered, name = 'a program'): Promise<NewToken> {
  return client.must<NewToken>('POST', '/api/tokens', { name, expiresInDays: 30, password: PASSWORD })
}

export interface Garage extends Registered {
  circuitId: string
  layoutId: string
  carId: string
  setupId: string
  dayId: string
  outingId: string
}

/** A team with a circuit, a layout, a car with a sheet, a day and one outing; no lines and no log yet. */
export async function garage(): Promise<Garage> {
  const registered = await register()
  const { client, me, teamId } = registered
  const id = async (path: string, body: unknown) => (await client.must<{ id: string }>('POST', path, body)).id
  const circuitId = await id(`/api/circuits?teamId=${teamId}`, { name: 'Harrow Fell', timeZone: 'Europe/London' })
  const layoutId = await id(`/api/circuits/${circuitId}/layouts`, { name: 'Full circuit' })
  const carId = await id(`/api/cars?teamId=${teamId}`, { name: 'No. 47', year: 2006, kind: 'hatchback' })
  const setupId = await id(`/api/cars/${carId}/setups`, { name: 'Baseline', sheet: emptySheet() })
  const dayId = await id(`/api/days?teamId=${teamId}`, { circuitId, date: '2026-09-12' })
  const outingId = await id(`/api/days/${dayId}/outings`, { layoutId, carId, setupId, driverId: me.id })
  return { ...registered, circuitId, layoutId, carId, setupId, dayId, outingId }
}

export function fixture(name: string): Buffer<ArrayBuffer> {
  return Buffer.from(readFileSync(new URL(`../../fixtures/${name}`, import.meta.url)))
}

interface LineFeature {
  properties: { role: SavedLine['kind'], order?: number }
  geometry: { coordinates: [[number, number], [number, number]] }
}

/** Timing lines of a GeoJSON file of fixtures/, as PUT /api/layouts/:id/lines takes them. */
export function fixtureLines(name: string) {
  const { features } = JSON.parse(fixture(name).toString()) as { features: LineFeature[] }
  const point = ([longitudeDeg, latitudeDeg]: [number, number]) => ({ latitudeDeg, longitudeDeg })
  return features.map(({ properties: { role, order }, geometry: { coordinates: [a, b] } }) =>
    ({ kind: role, ordinal: order ?? 0, a: point(a), b: point(b) }))
}

export async function saveLines(
  { client, layoutId }: Garage,
  lines: ReturnType<typeof fixtureLines>,
): Promise<Layout & { recutting: number }> {
  const { linesVersion } = await client.must<Layout>('GET', `/api/layouts/${layoutId}`)
  return client.must('PUT', `/api/layouts/${layoutId}/lines`, { basedOnVersion: linesVersion, lines })
}

/** Uploads a log to an outing of this team, takes its columns as guessed, and waits until it has been read. */
export function uploadAndRead(
  { client }: Registered,
  outingId: string,
  fileName: string,
  bytes: BlobPart,
): Promise<Log> {
  return uploadLog(client, outingId, fileName, bytes)
}

export async function lapsOf({ client }: Registered, outingId: string): Promise<Outing['laps']> {
  return (await client.must<Outing>('GET', `/api/outings/${outingId}`)).laps
}
