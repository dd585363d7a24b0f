import { describe, expect, it } from 'vitest'
import { waitFor } from '../../seeds/client'
import type { Circuit, Layout } from '../../shared/schemas/circuits'
import type { Day, DayListItem, Demonstration } from '../../shared/schemas/days'
import type { Car } from '../../shared/schemas/setups'
import { register, type Registered } from '../support/team'

const ask = ({ client, teamId }: Registered) => client.send<Demonstration>('POST', `/api/demonstration?teamId=${teamId}`)
const list = async <T>({ client, teamId }: Registered, what: string) =>
  (await client.must<{ items: T[] }>('GET', `/api/${what}?teamId=${teamId}`)).items

/** The day of the demonstration once the worker has read both logs. */
function readDay({ client }: Registered, dayId: string): Promise<Day> {
  return waitFor('the demonstration', async () => {
    const day = await client.must<Day>('GET', `/api/days/${dayId}`)
    return day.outings.every(outing => outing.logs.every(log => log.status === 'ready')) && day
  })
}

describe('POST /api/demonstration', () => {
  it('writes circuit, car, day and outings into the team, and their laps come by the ordinary way', async () => {
    const person = await register()
    const { status, body } = await ask(person)
    expect(status).toBe(201)
    expect(body.made).toBe(true)
    const day = await readDay(person, body.dayId)
    expect(day.circuit.name).toBe('Harrow Fell')
    expect(day.outings.map(outing => [outing.number, outing.setup.number, outing.driver.id]))
      .toEqual([[1, 1, person.me.id], [2, 2, person.me.id]])
    // The plan of seeds/harrow-fell: seven and eight timed laps, three sectors each.
    expect(day.outings.map(outing => outing.laps.filter(lap => lap.kind === 'timed').length)).toEqual([7, 8])
    for (const lap of day.outings.flatMap(outing => outing.laps).filter(each => each.kind === 'timed')) {
      expect(lap.sectorsS).toHaveLength(3)
      expect(lap.timeS).toBeGreaterThan(85)
      expect(lap.timeS).toBeLessThan(110)
    }
    expect(day.outings[1]!.setupChanges.length).toBeGreaterThan(0)
    const layout = await person.client.must<Layout>('GET', `/api/layouts/${day.outings[0]!.layout.id}`)
    expect(layout.lines.map(line => line.kind)).toEqual(['start_finish', 'sector', 'sector'])
  })

  it('leads to the one that is there when it is asked for again, even at the same moment', async () => {
    const person = await register()
    const answers = await Promise.all([ask(person), ask(person), ask(person)])
    expect(answers.map(answer => answer.status).sort()).toEqual([200, 200, 201])
    expect(new Set(answers.map(answer => answer.body.dayId)).size).toBe(1)
    const again = await ask(person)
    expect([again.status, again.body]).toEqual([200, { dayId: answers[0]!.body.dayId, made: false }])
    expect(await list<DayListItem>(person, 'days')).toHaveLength(1)
    expect(await list<Circuit>(person, 'circuits')).toHaveLength(1)
    expect(await list<Car>(person, 'cars')).toHaveLength(1)
  })

  it('gives a number to names that the team has given away already', async () => {
    const person = await register()
    await person.client.must('POST', `/api/circuits?teamId=${person.teamId}`, { name: 'harrow fell', timeZone: 'UTC' })
    await person.client.must('POST', `/api/cars?teamId=${person.teamId}`, { name: 'No. 47' })
    expect((await ask(person)).status).toBe(201)
    expect((await list<Circuit>(person, 'circuits')).map(circuit => circuit.name).sort()).toEqual(['Harrow Fell (2)', 'harrow fell'])
    expect((await list<Car>(person, 'cars')).map(car => car.name).sort()).toEqual(['No. 47', 'No. 47 (2)'])
  })

  it('belongs to one team alone', async () => {
    const [one, other] = [await register(), await register()]
    const { body } = await ask(one)
    expect((await other.client.send('GET', `/api/days/${body.dayId}`)).status).toBe(404)
    expect((await other.client.send('POST', `/api/demonstration?teamId=${one.teamId}`)).status).toBe(404)
    // The same bytes in another team are no twin.
    expect((await ask(other)).status).toBe(201)
  })

  it('says what is wrong with an address without a team', async () => {
    const { client } = await register()
    expect((await client.send('POST', '/api/demonstration')).status).toBe(400)
  })
})

describe('the list of days', () => {
  it('keeps the best of wet and dry apart, and says which it is', async () => {
    const person = await register()
    const { dayId } = (await ask(person)).body
    const day = await readDay(person, dayId)
    const bestOf = (number: number) => Math.min(...day.outings[number]!.laps.filter(lap => lap.kind === 'timed').map(lap => lap.timeS))
    const [first, second] = [bestOf(0), bestOf(1)]
    const listed = async () => (await list<DayListItem>(person, 'days'))[0]!
    expect(await listed()).toMatchObject({ bestS: Math.min(first, second), bestOf: null })

    const wet = async (i: number) => {
      const { id, layout, car, setup, driver, version } = (await person.client.must<Day>('GET', `/api/days/${dayId}`)).outings[i]!
      await person.client.must('PUT', `/api/outings/${id}`, {
        layoutId: layout.id, carId: car.id, setupId: setup.id, driverId: driver.id,
        conditions: { wetness: 'damp' }, basedOnVersion: version,
      })
    }
    // The quicker outing becomes a damp one: the best of the day is now the slower, dry one.
    const quicker = first < second ? 0 : 1
    await wet(quicker)
    expect(await listed()).toMatchObject({ bestS: Math.max(first, second), bestOf: 'dry' })
    await wet(1 - quicker)
    expect(await listed()).toMatchObject({ bestS: Math.min(first, second), bestOf: 'wet' })
  })
})
