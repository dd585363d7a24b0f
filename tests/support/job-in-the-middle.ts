import type { Knex } from 'knex'
import { waitFor } from '../../seeds/client'
import { confirmColumns, fixture, fixtureLines, garage, saveLines, type Garage } from './team'

export type WithLog = Garage & { logId: string }

/** A team with lines on its layout, and a log of its outing that is about to be read. */
export async function begun(): Promise<WithLog> {
  const made = await garage()
  await saveLines(made, fixtureLines('harrow-fell-lines.geojson'))
  const { body } = await made.client.upload<{ id: string }>(`/api/outings/${made.outingId}/logs`, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  return { ...made, logId: body.id }
}

/** How many stand in the queue behind a transaction, waiting for what it holds. */
export async function queueBehind(held: Knex.Transaction): Promise<number> {
  const { rows: [row] } = await held.raw(`with recursive queue (pid) as (
    select pg_backend_pid() union
    select a.pid from pg_stat_activity a join queue q on q.pid = any(pg_blocking_pids(a.pid))
  ) select count(*)::int - 1 as length from queue`)
  return row.length
}

/** Runs while the job that reads the log stands before the storing of its laps, having read and cleaned the file. */
export async function whileRead<T>(owner: Knex, of: WithLog, run: (held: Knex.Transaction) => Promise<T>): Promise<T> {
  const held = await owner.transaction()
  try {
    await held('outings').where('id', of.outingId).forUpdate().first('id')
    await confirmColumns(of.client, of.logId)
    await waitFor('the job to come to the storing', async () => await queueBehind(held) === 1, 20_000)
    return await run(held)
  }
  finally {
    // A database that was stopped has ended it already.
    if (!held.isCompleted()) await held.commit().catch(() => undefined)
  }
}
