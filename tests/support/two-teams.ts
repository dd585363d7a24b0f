import { randomUUID } from 'node:crypto'
import type { Client } from '../../seeds/client'
import { emptySheet } from '../../shared/schemas/setups'
import { fixture, fixtureLines, garage, lapsOf, makeToken, saveLines, uploadAndRead, type Garage } from './team'

const UUID = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/gi

export interface FilledTeam extends Garage { logId: string, lapIds: string[], token: string }

/** A team with lines, a log that has been read and its laps. */
export async function filledTeam(): Promise<FilledTeam> {
  const made = await garage()
  await saveLines(made, fixtureLines('harrow-fell-lines.geojson'))
  const log = await uploadAndRead(made, made.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  const lapIds = (await lapsOf(made, made.outingId)).filter(lap => lap.kind === 'timed').map(lap => lap.id)
  return { ...made, logId: log.id, lapIds, token: (await makeToken(made)).token }
}

/** Writes a marker into every text of a team that its sheets have, so that a leak of any of them is seen. */
export async function mark({ client, ...team }: FilledTeam, marker: string): Promise<void> {
  const put = async (path: string, body: object) => {
    const { version } = await client.must<{ version: number }>('GET', path)
    await client.must('PUT', path, { ...body, basedOnVersion: version })
  }
  const text = (what: string) => `${marker} ${what}`
  await put(`/api/circuits/${team.circuitId}`, { name: text('circuit'), timeZone: 'UTC', notes: text('notes') })
  await put(`/api/layouts/${team.layoutId}`, { name: text('layout'), direction: null })
  await put(`/api/cars/${team.carId}`, { name: text('car'), number: '', year: 2006, kind: text('kind'), notes: text('notes') })
  await put(`/api/days/${team.dayId}`, { circuitId: team.circuitId, date: '2026-09-12', name: text('day'), notes: text('notes') })
  await put(`/api/outings/${team.outingId}`, {
    layoutId: team.layoutId, carId: team.carId, setupId: team.setupId, driverId: team.me.id, notes: text('outing'),
  })
  const sheet = { ...emptySheet(), notes: text('notes') }
  await client.must('POST', `/api/cars/${team.carId}/setups`, { name: text('sheet'), sheet })
}

/** Every identifier that a team's own answers hold. */
export async function identifiersOf(team: FilledTeam): Promise<string[]> {
  const { client, teamId, dayId, carId, circuitId, logId, layoutId } = team
  const paths = [
    '/api/me', '/api/tokens', `/api/members?teamId=${teamId}`, `/api/days/${dayId}`, `/api/cars/${carId}`,
    `/api/circuits/${circuitId}`, `/api/layouts/${layoutId}`, `/api/logs/${logId}`,
  ]
  const answers = []
  for (const path of paths) answers.push(JSON.stringify(await client.must('GET', path)))
  return [...new Set(answers.join(' ').match(UUID)!.map(id => id.toLowerCase()))]
}

/** Things of a team that may be taken away without anything else missing them, by the first word of their path. */
export async function makeSpare(team: FilledTeam, count: number): Promise<Record<string, string[]>> {
  const { client, teamId, circuitId, carId, dayId, layoutId, setupId, me } = team
  const outing = { layoutId, carId, setupId, driverId: me.id }
  const make: Record<string, () => Promise<{ id: string }>> = {
    circuits: () => client.must('POST', `/api/circuits?teamId=${teamId}`, { name: randomUUID(), timeZone: 'UTC' }),
    layouts: () => client.must('POST', `/api/circuits/${circuitId}/layouts`, { name: randomUUID() }),
    cars: () => client.must('POST', `/api/cars?teamId=${teamId}`, { name: randomUUID() }),
    setups: () => client.must('POST', `/api/cars/${carId}/setups`, { name: 'Spare', sheet: emptySheet() }),
    days: () => client.must('POST', `/api/days?teamId=${teamId}`, { circuitId, date: '2026-10-03' }),
    outings: () => client.must('POST', `/api/days/${dayId}/outings`, outing),
    tokens: () => makeToken(team),
    logs: () => upload(client, team.outingId),
  }
  const spare: Record<string, string[]> = {}
  for (const [what, one] of Object.entries(make)) {
    spare[what] = []
    for (let i = 0; i < count; i++) spare[what].push((await one()).id)
  }
  return spare
}

async function upload(client: Client, outingId: string): Promise<{ id: string }> {
  const text = `# ${randomUUID()}\n${fixture('short-loop.csv').toString()}`
  const { status, body } = await client.upload<{ id: string }>(`/api/outings/${outingId}/logs`, 'spare.csv', text)
  if (status !== 201) throw new Error(`the upload of a spare log was answered with ${status}`)
  return body
}
