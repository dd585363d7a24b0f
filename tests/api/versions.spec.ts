import { beforeAll, describe, expect, it } from 'vitest'
import { CHANGED_TYPE, type Problem } from '../../shared/schemas/common'
import { fixture, fixtureLines, garage, saveLines, uploadAndRead, type Garage } from '../support/team'

interface Sheet { version: number, changedAt: string, name?: string, notes?: string }

let own: Garage

beforeAll(async () => {
  own = await garage()
})

const outing = (of: Garage) => ({ layoutId: of.layoutId, carId: of.carId, setupId: of.setupId, driverId: of.me.id })

/** Every sheet that a form replaces as a whole, and two ways to fill it that differ in a word. */
const SHEETS: Record<string, { path: (of: Garage) => string, body: (of: Garage, word: string) => object, word: 'name' | 'notes' }> = {
  circuit: { path: of => `/api/circuits/${of.circuitId}`, body: (_, notes) => ({ name: 'Harrow Fell', timeZone: 'Europe/London', notes }), word: 'notes' },
  layout: { path: of => `/api/layouts/${of.layoutId}`, body: (_, name) => ({ name }), word: 'name' },
  car: { path: of => `/api/cars/${of.carId}`, body: (_, notes) => ({ name: 'No. 47', notes }), word: 'notes' },
  day: { path: of => `/api/days/${of.dayId}`, body: (of, notes) => ({ circuitId: of.circuitId, date: '2026-09-12', notes }), word: 'notes' },
  outing: { path: of => `/api/outings/${of.outingId}`, body: (of, notes) => ({ ...outing(of), notes }), word: 'notes' },
}

describe.each(Object.entries(SHEETS))('a %s', (_name, { path, body, word }) => {
  const read = () => own.client.must<Sheet>('GET', path(own))
  const write = (text: string, basedOnVersion: unknown) =>
    own.client.send<Sheet & Problem>('PUT', path(own), { ...body(own, text), basedOnVersion })

  it('goes up by one version with each change, and not by saving what it is', async () => {
    const before = await read()
    const first = await write('Noise limit 98 dB', before.version)
    expect(first).toMatchObject({ status: 200, body: { version: before.version + 1, [word]: 'Noise limit 98 dB' } })
    expect(Date.parse(first.body.changedAt)).toBeGreaterThan(Date.parse(before.changedAt))
    expect((await write('Noise limit 98 dB', before.version + 1)).body.version).toBe(before.version + 1)
  })

  it('is not overwritten by somebody who has not seen its last change', async () => {
    const { version } = await read()
    expect((await write('theirs', version)).status).toBe(200)
    const late = await write('mine', version)
    expect(late).toMatchObject({ status: 409, body: { type: CHANGED_TYPE } })
    expect(late.body.detail).toMatch(/Somebody else changed this sheet at \d\d:\d\d UTC/)
    expect(await read()).toMatchObject({ version: version + 1, [word]: 'theirs' })
    expect((await write('mine', version + 1)).status).toBe(200)
    expect((await read())[word]).toBe('mine')
  })

  it('of many who save at the same moment takes one', async () => {
    const { version } = await read()
    const answers = await Promise.all(['a', 'b', 'c', 'd'].map(text => write(text, version)))
    expect(answers.map(answer => answer.status).sort()).toEqual([200, 409, 409, 409])
  })

  it.each([undefined, null, 0, -1, 1.5, '1', 2 ** 31, 1e300])('is not changed on the version %s', async (version) => {
    const { status, body: problem } = await write('x', version)
    expect(status).toBe(400)
    expect(problem.errors?.[0]?.path).toBe('basedOnVersion')
  })
})

it('does not call a layout changed because its lines or its laps are', async () => {
  const before = await own.client.must<Sheet>('GET', `/api/layouts/${own.layoutId}`)
  await saveLines(own, fixtureLines('harrow-fell-lines.geojson'))
  await uploadAndRead(own, own.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  const after = await own.client.must<Sheet & { lengthM: number }>('GET', `/api/layouts/${own.layoutId}`)
  expect(after.lengthM).toBeGreaterThan(1000)
  expect(after.version).toBe(before.version)
})
