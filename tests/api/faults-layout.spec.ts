import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { Log, Outing } from '../../shared/schemas/days'
import { waitFor } from '../../seeds/client'
import { connect } from '../support/database'
import { confirmColumns, fixture, fixtureLines, garage, lapsOf, saveLines, settled, type Garage } from '../support/team'

/** The owner's connection, which can hold a row and so stop a job in the middle. */
let owner: Knex

beforeAll(() => {
  owner = connect('owner')
})

afterAll(() => owner.destroy())

/** A team with lines on its layout, and a log of its outing that is about to be read. */
async function begun(): Promise<Garage & { logId: string }> {
  const made = await garage()
  await saveLines(made, fixtureLines('harrow-fell-lines.geojson'))
  const { body } = await made.client.upload<{ id: string }>(`/api/outings/${made.outingId}/logs`, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  return { ...made, logId: body.id }
}

/** How many stand in the queue behind a transaction, waiting for what it holds. */
async function queueBehind(held: Knex.Transaction): Promise<number> {
  const { rows: [row] } = await held.raw(`with recursive queue (pid) as (
    select pg_backend_pid() union
    select a.pid from pg_stat_activity a join queue q on q.pid = any(pg_blocking_pids(a.pid))
  ) select count(*)::int - 1 as length from queue`)
  return row.length
}

/** Runs while the job that reads the log stands before the storing of its laps, having read and cleaned the file. */
async function whileRead<T>(of: Garage & { logId: string }, run: (held: Knex.Transaction) => Promise<T>): Promise<T> {
  const held = await owner.transaction()
  try {
    await held('outings').where('id', of.outingId).forUpdate().first('id')
    await confirmColumns(of.client, of.logId)
    await waitFor('the job to come to the storing', async () => await queueBehind(held) === 1, 20_000)
    return await run(held)
  }
  finally {
    if (!held.isCompleted()) await held.commit()
  }
}

const timed = async (of: Garage) => (await lapsOf(of, of.outingId)).filter(lap => lap.kind === 'timed').length

/** A second layout of the circuit, with the start and finish line alone: laps have one sector there. */
async function secondLayout(of: Garage): Promise<string> {
  const { id } = await of.client.must<{ id: string }>('POST', `/api/circuits/${of.circuitId}/layouts`, { name: 'Other' })
  await saveLines({ ...of, layoutId: id }, fixtureLines('harrow-fell-lines.geojson').slice(0, 1))
  return id
}

async function move(of: Garage, layoutId: string) {
  const now = await of.client.must<Outing>('GET', `/api/outings/${of.outingId}`)
  const body = { layoutId, carId: of.carId, setupId: of.setupId, driverId: of.me.id, basedOnVersion: now.version }
  return of.client.send('PUT', `/api/outings/${of.outingId}`, body)
}

describe('a layout', () => {
  it('that is to be removed while a log of it is being read stays, and the log comes out ready', async () => {
    const of = await begun()
    await whileRead(of, async () => {
      expect((await of.client.must<Log>('GET', `/api/logs/${of.logId}`)).status).toBe('processing')
      const started = Date.now()
      const refused = await of.client.send<Problem>('DELETE', `/api/layouts/${of.layoutId}`)
      expect(refused.status).toBe(409)
      expect(refused.body.detail).toMatch(/1 outing was driven on this layout/)
      // The answer does not wait for the job.
      expect(Date.now() - started).toBeLessThan(3000)
    })
    expect(await settled(of.client, of.logId)).toMatchObject({ status: 'ready', problem: null })
    expect(await timed(of)).toBeGreaterThan(5)
  })

  it('whose outing is moved to another one while its log is read can go, and the laps are those of the other', async () => {
    const of = await begun()
    const other = await secondLayout(of)
    const moved = await whileRead(of, async (held) => {
      // Queued behind the job, which cuts on the old layout first.
      const moving = move(of, other)
      await waitFor('the change to wait', async () => await queueBehind(held) === 2, 10_000)
      await held.commit()
      return moving
    })
    expect(moved.status).toBe(200)
    expect((await of.client.send('DELETE', `/api/layouts/${of.layoutId}`)).status).toBe(204)
    await comesRight(of, other)
  })

  it('the same, when the outing is moved before the job comes to its laps', async () => {
    const of = await begun()
    const other = await secondLayout(of)
    await whileRead(of, async (held) => {
      // What the route writes, by whoever holds the row: the job waits, and then sees the outing where it is now.
      await held('outings').where('id', of.outingId).update({ layout_id: other })
      await held.commit()
    })
    await waitFor('the log', async () => (await of.client.must<Log>('GET', `/api/logs/${of.logId}`)).status === 'ready')
    expect((await of.client.send('DELETE', `/api/layouts/${of.layoutId}`)).status).toBe(204)
    await comesRight(of, other)
  })
})

async function comesRight(of: Garage & { logId: string }, layoutId: string): Promise<void> {
  expect(await settled(of.client, of.logId)).toMatchObject({ status: 'ready', problem: null, outing: { layoutId } })
  const laps = await waitFor('the laps of the other layout', async () => {
    const found = (await lapsOf(of, of.outingId)).filter(lap => lap.kind === 'timed')
    return found.every(lap => lap.sectorsS.length === 1) && found
  })
  expect(laps.length).toBeGreaterThan(5)
}
