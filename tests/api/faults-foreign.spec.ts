import { randomUUID } from 'node:crypto'
import { beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { Log, Outing } from '../../shared/schemas/days'
import { emptySheet } from '../../shared/schemas/setups'
import { fixture, fixtureLines, garage, type Garage } from '../support/team'

let own: Garage
let other: Garage

beforeAll(async () => {
  [own, other] = [await garage(), await garage()]
})

const outing = (of: Garage) => ({ layoutId: of.layoutId, carId: of.carId, setupId: of.setupId, driverId: of.me.id })

describe('an identifier of another team in a body', () => {
  it.each(['layoutId', 'carId', 'setupId', 'driverId'] as const)('as the %s of an outing is refused at that field, as is one that nobody has', async (field) => {
    const before = await own.client.must<Outing>('GET', `/api/outings/${own.outingId}`)
    for (const id of [outing(other)[field], randomUUID()]) {
      const body = { ...outing(own), [field]: id }
      const made = await own.client.send<Problem>('POST', `/api/days/${own.dayId}/outings`, body)
      const changed = await own.client.send<Problem>('PUT', `/api/outings/${own.outingId}`, { ...body, basedOnVersion: before.version })
      for (const answer of [made, changed]) {
        expect([answer.status, answer.body.errors]).toEqual([422, [{ path: expect.stringMatching(/^(?:layout|car|setup|driver)Id$/) as string, message: answer.body.detail }]])
        // A foreign car takes its setup with it: the field that is named is the first that does not fit.
        if (field !== 'carId') expect(answer.body.errors![0]!.path).toBe(field)
      }
    }
    expect(await own.client.must<Outing>('GET', `/api/outings/${own.outingId}`)).toEqual(before)
  })

  it('as the circuit of a day is refused at that field', async () => {
    for (const circuitId of [other.circuitId, randomUUID()]) {
      const answer = await own.client.send<Problem>('POST', `/api/days?teamId=${own.teamId}`, { circuitId, date: '2026-10-01' })
      expect([answer.status, answer.body.errors?.[0]?.path]).toEqual([422, 'circuitId'])
    }
  })

  it('as the sheet that another is based on is refused at that field', async () => {
    for (const basedOnId of [other.setupId, randomUUID()]) {
      const answer = await own.client.send<Problem>('POST', `/api/cars/${own.carId}/setups`, { name: 'Softer', basedOnId, sheet: emptySheet() })
      expect([answer.status, answer.body.errors?.[0]?.path]).toEqual([422, 'basedOnId'])
    }
  })

  it('as the log of a line trial, of a removal and of a comparison leads to nothing of the other team', async () => {
    const { body: { id: logId } } = await other.client.upload<{ id: string }>(`/api/outings/${other.outingId}/logs`, 'theirs.csv', fixture('short-loop.csv'))
    const trial = await own.client.send<Problem>('POST', `/api/layouts/${own.layoutId}/line-trials`, { logId, lines: fixtureLines('harrow-fell-lines.geojson') })
    expect(trial.status).toBe(404)
    expect(trial.body.detail).not.toContain('theirs.csv')
    const removal = await own.client.send<Problem>('DELETE', `/api/outings/${other.outingId}?withLog=${logId}`)
    expect(removal.status).toBe(404)
    const spare = await own.client.must<{ id: string }>('POST', `/api/days/${own.dayId}/outings`, outing(own))
    await own.client.send('DELETE', `/api/outings/${spare.id}?withLog=${logId}`)
    expect((await other.client.must<Log>('GET', `/api/logs/${logId}`)).fileName).toBe('theirs.csv')
  })

  it('in a lap’s or a log’s address says that there is none in the person’s teams', async () => {
    const answer = await own.client.send<Problem>('GET', `/api/outings/${other.outingId}`)
    expect([answer.status, answer.body.detail]).toEqual([404, 'There is no such outing in your teams.'])
    const upload = await own.client.upload<Problem>(`/api/outings/${other.outingId}/logs`, 'mine.csv', fixture('short-loop.csv'))
    expect(upload.status).toBe(404)
    expect((await other.client.must<Outing>('GET', `/api/outings/${other.outingId}`)).logs.map(log => log.fileName)).not.toContain('mine.csv')
  })
})
