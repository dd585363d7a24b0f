import { randomUUID } from 'node:crypto'
import { makeClient, type Client } from '../../seeds/client'
import { driveOuting } from '../../seeds/harrow-fell/drive'
import { setupGrip } from '../../seeds/harrow-fell/grip'
import { USUAL_LOG, writeLog } from '../../seeds/harrow-fell/log'
import { PLAN } from '../../seeds/harrow-fell/plan'
import { makeRandom } from '../../seeds/harrow-fell/random'
import { setupNumber } from '../../seeds/harrow-fell/sheets'
import { makeTrack } from '../../seeds/harrow-fell/track'
import { emptySheet } from '../../shared/schemas/setups'
import type { Me } from '../../shared/schemas/people'

const PASSWORD = 'measured and written down'
const track = makeTrack()

/** The log of a long outing at Harrow Fell as CSV, the same bytes for the same seed. */
export function longLog(timedLaps: number, rateHz: number, seed: number): string {
  const base = setupNumber(1).sheet
  const outing = driveOuting(track, {
    timedLaps, setup: setupGrip(base, base), dayGrip: 1, fuelL: 40, traffic: null, line: 'driven',
  }, makeRandom(seed))
  return writeLog(outing, { ...USUAL_LOG, rateHz }, makeRandom(seed + 1)).csv
}

export interface Team {
  client: Client
  email: string
  password: string
  teamId: string
  layoutId: string
  /** Adds an outing to the team's one day. */
  addOuting: () => Promise<string>
}

/** A team with Harrow Fell and its lines, a car with a sheet and a day. */
export async function makeTeam(baseUrl: string): Promise<Team> {
  const client = makeClient(baseUrl)
  const email = `${randomUUID()}@lapwright.example`
  const me = await client.must<Me>('POST', '/api/register', { name: 'Nell Placeholder', email, password: PASSWORD, teamName: 'Bench' })
  const teamId = me.teams[0]!.id
  const id = async (path: string, body: unknown) => (await client.must<{ id: string }>('POST', path, body)).id
  const { layout, ...circuit } = PLAN.circuit
  const circuitId = await id(`/api/circuits?teamId=${teamId}`, circuit)
  const layoutId = await id(`/api/circuits/${circuitId}/layouts`, layout)
  const lines = track.lines.map(({ kind, ordinal, a, b }) => ({ kind, ordinal, a, b }))
  await client.must('PUT', `/api/layouts/${layoutId}/lines`, { basedOnVersion: 0, lines })
  const carId = await id(`/api/cars?teamId=${teamId}`, PLAN.car)
  const setupId = await id(`/api/cars/${carId}/setups`, { name: 'Baseline', sheet: emptySheet() })
  const dayId = await id(`/api/days?teamId=${teamId}`, { circuitId, date: '2026-09-12' })
  const outing = { layoutId, carId, setupId, driverId: me.id }
  return { client, email, password: PASSWORD, teamId, layoutId, addOuting: () => id(`/api/days/${dayId}/outings`, outing) }
}
