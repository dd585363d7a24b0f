import type { Knex } from 'knex'

export type WriterRole = 'owner' | 'driver' | 'coach' | 'crew'

/**
 * Puts a tenant table under row-level security: members of its team may read, the named roles (and a job of the team)
 * may write. A forgotten `where` then shows nothing instead of another team's rows.
 * `any(array(select ...))` lets PostgreSQL use the index on team_id; `in (select ...)` scans the table.
 */
export async function protectTenantTable(knex: Knex, table: string, writers: readonly WriterRole[]): Promise<void> {
  const own = 'team_id = any(array(select app.team_ids()))'
  const writable = `team_id = any(array(select app.team_ids_as('{${writers.join(',')}}')))`
  await knex.raw(`
    alter table ${table} enable row level security;
    create policy ${table}_read on ${table} for select to lapwright_app using (${own});
    create policy ${table}_add on ${table} for insert to lapwright_app with check (${writable});
    create policy ${table}_change on ${table} for update to lapwright_app using (${writable}) with check (${writable});
    create policy ${table}_remove on ${table} for delete to lapwright_app using (${writable});
    grant select, insert, update, delete on ${table} to lapwright_app;
  `)
}

/**
 * Splits a table by hash of team_id. The partitions are reached through their parent alone: the application has no
 * grant on them, and row-level security is on without a policy, which refuses everything.
 */
export async function partitionByTeam(knex: Knex, table: string, parts = 8): Promise<void> {
  for (let part = 0; part < parts; part++) {
    await knex.raw(`
      create table ${table}_${part} partition of ${table} for values with (modulus ${parts}, remainder ${part});
      alter table ${table}_${part} enable row level security;
    `)
  }
}
