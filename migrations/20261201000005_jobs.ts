import type { Knex } from 'knex'
import PgBoss from 'pg-boss'

// The plan of pg-boss brings its own transaction.
export const config = { transaction: false }

/**
 * The job queue. Its tables and queues are made here, by the owner; the processes run it with `migrate: false` and may
 * only change rows. A job of a killed worker is due again when it expires: just above the longest log, not pg-boss's
 * quarter of an hour.
 */
export async function up(knex: Knex): Promise<void> {
  const installed = await knex.raw('select to_regclass(\'pgboss.job\') as job')
  if (!installed.rows[0].job) await knex.raw(PgBoss.getConstructionPlans('pgboss'))
  const options = { policy: 'standard', retryLimit: 3, retryDelay: 1, retryBackoff: false, expireInSeconds: 90, retentionMinutes: 60 * 24 * 7 }
  const queue = (name: string, deadLetter?: string) =>
    knex.raw('select pgboss.create_queue(?, ?::json)', [name, JSON.stringify({ ...options, deadLetter })])
  // A job that failed or was killed at its last try goes on to the queue that gives it up.
  for (const name of ['log-read', 'layout-cut']) {
    await queue(`${name}-failed`)
    await queue(name, `${name}-failed`)
  }
  await knex.raw(`
    grant usage on schema pgboss to lapwright_app;
    grant select, insert, update, delete on all tables in schema pgboss to lapwright_app;
    grant execute on all functions in schema pgboss to lapwright_app;
  `)
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop schema pgboss cascade')
}
