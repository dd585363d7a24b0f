/**
 * Fills in the demonstration team through the running server, by the same routes that a person uses, so that its laps
 * have gone through the real pipeline. Runs again where an earlier attempt was cut off.
 *
 * LAPWRIGHT_URL: the server; DATABASE_OWNER_URL: for the two members who would be invited;
 * LAPWRIGHT_DEMO_FILE: where the sign-ins are written.
 */
import { randomBytes } from 'node:crypto'
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import process from 'node:process'
import knex from 'knex'
import { makeClient, type Client } from '../seeds/client'
import { demoLogs } from '../seeds/harrow-fell/demo-logs'
import { PLAN, type PlannedDay } from '../seeds/harrow-fell/plan'
import { makeTrack } from '../seeds/harrow-fell/track'
import { uploadLog } from '../seeds/upload'
import type { Me } from '../shared/schemas/people'

interface SignIn { name: string, email: string, role: string, password: string }

const url = needed('LAPWRIGHT_URL')
const signIns = passwords(needed('LAPWRIGHT_DEMO_FILE'))

function needed(name: string): string {
  const value = process.env[name]
  if (!value) throw new Error(`${name} is not set`)
  return value
}

/** Passwords are this installation's own; an earlier attempt's are kept. */
function passwords(file: string): SignIn[] {
  if (existsSync(file)) return (JSON.parse(readFileSync(file, 'utf8')) as { signIns: SignIn[] }).signIns
  const made = PLAN.people.map(({ name, email, role }) => ({ name, email, role, password: randomBytes(9).toString('base64url') }))
  writeFileSync(file, JSON.stringify({ signIns: made }, null, 2), { mode: 0o600 })
  return made
}

/** Takes away what an attempt that was cut off has left. */
async function startAfresh(database: knex.Knex): Promise<void> {
  const emails = PLAN.people.map(person => person.email)
  await database.transaction(async (db) => {
    const users = await db('users').whereIn('email', emails).pluck('id')
    const teams = await db('memberships').whereIn('user_id', users).pluck('team_id')
    await db('outings').whereIn('team_id', teams).delete()
    await db('track_days').whereIn('team_id', teams).delete()
    await db('teams').whereIn('id', teams).delete()
    await db('users').whereIn('id', users).delete()
  })
}

async function addPeople(database: knex.Knex): Promise<{ owner: Client, me: Me }> {
  const [owner, ...others] = signIns
  const client = makeClient(url)
  const me = await client.must<Me>('POST', '/api/register', { ...owner, teamName: PLAN.team })
  for (const person of others) {
    const { id, teams } = await makeClient(url).must<Me>('POST', '/api/register', { ...person, teamName: person.name })
    await database('memberships').insert({ team_id: me.teams[0]!.id, user_id: id, role: person.role })
    // Invited people need no team of their own.
    await database('teams').where('id', teams[0]!.id).delete()
  }
  return { owner: client, me }
}

async function seed(database: knex.Knex): Promise<void> {
  await startAfresh(database)
  const { owner, me } = await addPeople(database)
  const team = `?teamId=${me.teams[0]!.id}`
  const { layout, ...circuit } = PLAN.circuit
  const circuitId = (await owner.must<{ id: string }>('POST', `/api/circuits${team}`, circuit)).id
  const layoutId = (await owner.must<{ id: string }>('POST', `/api/circuits/${circuitId}/layouts`, layout)).id
  const lines = makeTrack().lines.map(({ kind, ordinal, a, b }) => ({ kind, ordinal, a, b }))
  await owner.must('PUT', `/api/layouts/${layoutId}/lines`, { basedOnVersion: 0, lines })
  const carId = (await owner.must<{ id: string }>('POST', `/api/cars${team}`, PLAN.car)).id
  const setupIds = await addSetups(owner, carId)
  for (const day of PLAN.days) await addDay(owner, day, { team, circuitId, layoutId, carId, setupIds, driverId: me.id })
}

async function addSetups(owner: Client, carId: string): Promise<Map<number, string>> {
  const ids = new Map<number, string>()
  for (const { number, name, basedOn, sheet } of PLAN.setups) {
    const basedOnId = basedOn === null ? null : ids.get(basedOn)
    const { id } = await owner.must<{ id: string }>('POST', `/api/cars/${carId}/setups`, { name, basedOnId, sheet })
    ids.set(number, id)
  }
  return ids
}

interface Around {
  team: string
  circuitId: string
  layoutId: string
  carId: string
  setupIds: Map<number, string>
  driverId: string
}

async function addDay(owner: Client, day: PlannedDay, around: Around): Promise<void> {
  const { date, name, notes } = day
  const dayId = (await owner.must<{ id: string }>('POST', `/api/days${around.team}`, { circuitId: around.circuitId, date, name, notes })).id
  for (const log of logs.filter(item => item.date === date)) {
    const { setup, startedAt, fuelStartL, conditions, hotPressures, notes: said } = log.outing
    const outing = await owner.must<{ id: string }>('POST', `/api/days/${dayId}/outings`, {
      layoutId: around.layoutId,
      carId: around.carId,
      setupId: around.setupIds.get(setup),
      driverId: around.driverId,
      startedAt,
      fuelStartL,
      conditions,
      hotPressures,
      notes: said,
    })
    const read = await uploadLog(owner, outing.id, log.fileName, log.csv)
    if (read.status !== 'ready') throw new Error(`${log.fileName} was not cut into laps: ${read.problem?.message ?? read.status}`)
  }
}

const logs = demoLogs()
const database = knex({ client: 'pg', connection: needed('DATABASE_OWNER_URL'), pool: { min: 0, max: 1 } })
try {
  await seed(database)
}
finally {
  await database.destroy()
}
