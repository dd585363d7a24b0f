import type { Knex } from 'knex'

/** Tables whose rows a form replaces as a whole, and the columns that it replaces. */
const FORMS = {
  circuits: 'name, time_zone, notes',
  // Its lines have a version of their own, and its length comes from the laps.
  layouts: 'name, direction',
  cars: 'name, number, year, kind, notes',
  track_days: 'circuit_id, date, name, notes',
  outings: `layout_id, car_id, setup_revision_id, driver_id, started_at, fuel_start_l, passenger, conditions,
    hot_pressures, notes`,
} as const

/** Attempts that are counted, and versions by which two people at one sheet are noticed. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    -- Of rate-limiter-flexible, which asks for these columns in this order. Keys name a person by a hash and a network
    -- by its address; a row has no team, so it lies out of public, where every table is of a team.
    create table app.attempts (
      key varchar(255) primary key,
      points integer not null default 0,
      -- ms since 1970
      expire bigint
    );
    create index attempts_expire on app.attempts (expire);
    grant select, insert, update, delete on app.attempts to lapwright_app;

    -- Raised by the database, so that no way of changing a sheet can forget it.
    create function app.raise_version() returns trigger language plpgsql as $$
      begin
        new.version := old.version + 1;
        new.changed_at := clock_timestamp();
        return new;
      end
    $$;
    revoke execute on function app.raise_version from public;
  `)
  for (const [table, columns] of Object.entries(FORMS)) {
    await knex.raw(`
      alter table ${table} add column version integer not null default 1,
        add column changed_at timestamptz not null default now();
      create trigger ${table}_version before update of ${columns} on ${table}
        for each row when (old.* is distinct from new.*) execute function app.raise_version();
    `)
  }
}

export async function down(knex: Knex): Promise<void> {
  for (const table of Object.keys(FORMS)) {
    await knex.raw(`drop trigger ${table}_version on ${table};
      alter table ${table} drop column version, drop column changed_at`)
  }
  await knex.raw('drop function app.raise_version; drop table app.attempts')
}
