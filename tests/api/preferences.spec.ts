import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Knex } from 'knex'
import type { Problem } from '../../shared/schemas/common'
import type { Day, Outing } from '../../shared/schemas/days'
import { FIRST_PREFERENCES, type Me } from '../../shared/schemas/people'
import { emptySheet, type Setup } from '../../shared/schemas/setups'
import { makeClient } from '../../seeds/client'
import { addMember, connect } from '../support/database'
import { baseUrl, garage, PASSWORD, register } from '../support/team'

const CHOSEN = { units: 'imperial', numberLanguage: 'de-DE', sheet: 'dark' }

let application: Knex
let owner: Knex
beforeAll(() => {
  application = connect('application')
  owner = connect('owner')
})
afterAll(async () => {
  await application.destroy()
  await owner.destroy()
})

describe('preferences', () => {
  it('are what strangers get at first, and stay with the person through another sign-in', async () => {
    const { client, email, me } = await register()
    expect(me.preferences).toEqual(FIRST_PREFERENCES)
    const changed = await client.must<Me>('PUT', '/api/me/preferences', CHOSEN)
    expect(changed.preferences).toEqual(CHOSEN)
    const elsewhere = makeClient(baseUrl())
    const again = await elsewhere.must<Me>('POST', '/api/sign-in', { email, password: PASSWORD })
    expect(again).toEqual({ ...me, preferences: CHOSEN })
  })

  it.each([
    [{ ...CHOSEN, units: 'nautical' }, 'units'],
    [{ ...CHOSEN, numberLanguage: 'xx-XX' }, 'numberLanguage'],
    [{ units: 'metric', numberLanguage: 'en-GB' }, 'sheet'],
  ])('are refused as %j', async (body, path) => {
    const { client } = await register()
    const { status, body: problem } = await client.send<Problem>('PUT', '/api/me/preferences', body)
    expect([status, problem.errors?.map(error => error.path)]).toEqual([400, [path]])
    expect((await client.must<Me>('GET', '/api/me')).preferences).toEqual(FIRST_PREFERENCES)
  })

  it('of a team mate cannot be changed, even around the routes', async () => {
    const mine = await register()
    const mate = await register('Bo Testcase')
    await addMember(owner, mine.teamId, mate.me.id, 'driver')
    const changed = await application.transaction(async (db) => {
      await db.raw('select set_config(\'lapwright.user_id\', ?, true)', [mine.me.id])
      return db('users').whereIn('id', [mine.me.id, mate.me.id]).update({ units: 'imperial' })
    })
    expect(changed).toBe(1)
    expect((await mate.client.must<Me>('GET', '/api/me')).preferences.units).toBe('metric')
  })
})

describe('what is stored', () => {
  it('keeps figures that were typed in imperial units as they are', async () => {
    const { client, carId } = await garage()
    const sheet = emptySheet()
    sheet.corners.fl.springNpmm = 28.020293639420
    sheet.corners.fl.coldKpa = 183.05580613362
    const { id } = await client.must<{ id: string }>('POST', `/api/cars/${carId}/setups`, { name: 'By the pound', sheet })
    const stored = await client.must<Setup>('GET', `/api/setups/${id}`)
    expect(stored.sheet.corners.fl).toMatchObject({ springNpmm: 28.020293639420, coldKpa: 183.05580613362 })
  })
})

describe('a day whose date is corrected', () => {
  it('takes the starts of its outings with it, at the same time of day at the circuit', async () => {
    const { client, circuitId, layoutId, carId, setupId, me, dayId } = await garage()
    const start = async (startedAt: string | null) => (await client.must<{ id: string }>('POST', `/api/days/${dayId}/outings`, { layoutId, carId, setupId, driverId: me.id, startedAt })).id
    // 13:20 and, after midnight, 00:10 British Summer Time; one without a start.
    const ids = [await start('2026-09-12T12:20:00Z'), await start('2026-09-12T23:10:00Z'), await start(null)]
    const { version } = await client.must<Day>('GET', `/api/days/${dayId}`)
    await client.must('PUT', `/api/days/${dayId}`, { circuitId, date: '2026-11-14', basedOnVersion: version })
    const starts = await Promise.all(ids.map(async id => (await client.must<Outing>('GET', `/api/outings/${id}`)).startedAt))
    expect(starts).toEqual(['2026-11-14T13:20:00.000Z', '2026-11-15T00:10:00.000Z', null])
    // Another name alone moves nothing.
    const after = await client.must<Day>('GET', `/api/days/${dayId}`)
    await client.must('PUT', `/api/days/${dayId}`, { circuitId, date: '2026-11-14', name: 'Winter day', basedOnVersion: after.version })
    expect((await client.must<Outing>('GET', `/api/outings/${ids[0]!}`)).startedAt).toBe(starts[0])
  })
})
