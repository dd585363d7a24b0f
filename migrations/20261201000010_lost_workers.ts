import type { Knex } from 'knex'

/**
 * A job whose worker was lost is found within seconds by the lock that the worker held (server/utils/lost-jobs.ts). The
 * expiry of the queue is the last net only, and longer than any log takes, so that no living worker loses its job.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    -- Its reading has begun again, because the worker was lost in the middle of it.
    alter table logs add column restarted boolean not null default false;
    update pgboss.queue set expire_seconds = 900;
  `)
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    update pgboss.queue set expire_seconds = 90;
    alter table logs drop column restarted;
  `)
}
