import type { Knex } from 'knex'

/** References that would take laps away in silence: [table, its columns, what they name]. */
const STANDS_ON = [
  ['outings', 'team_id, circuit_id, day_id', 'track_days (team_id, circuit_id, id)'],
  ['log_parts', 'team_id, outing_id', 'outings (team_id, id)'],
  ['laps', 'team_id, outing_id', 'outings (team_id, id)'],
] as const

/** The names of the references as PostgreSQL gave them. */
function nameOf(table: string, columns: string): string {
  return `${table}_${columns.replaceAll(', ', '_')}_fkey`
}

async function onDelete(knex: Knex, action: 'restrict' | 'cascade'): Promise<void> {
  for (const [table, columns, names] of STANDS_ON) {
    await knex.raw(`
      alter table ${table} drop constraint ${nameOf(table, columns)};
      alter table ${table} add constraint ${nameOf(table, columns)}
        foreign key (${columns}) references ${names} on delete ${action};
    `)
  }
}

async function carWriters(knex: Knex, roles: string): Promise<void> {
  const writable = `team_id = any(array(select app.team_ids_as('{${roles}}')))`
  await knex.raw(`
    alter policy cars_add on cars with check (${writable});
    alter policy cars_change on cars using (${writable}) with check (${writable});
    alter policy cars_remove on cars using (${writable});
  `)
}

/**
 * Crew write setup sheets, outings and logs, and no cars any more. What laps stand on can no longer be removed from
 * under them: a day goes without outings, an outing without logs and laps.
 */
export async function up(knex: Knex): Promise<void> {
  await carWriters(knex, 'owner,driver')
  await onDelete(knex, 'restrict')
}

export async function down(knex: Knex): Promise<void> {
  await onDelete(knex, 'cascade')
  await carWriters(knex, 'owner,driver,crew')
}
