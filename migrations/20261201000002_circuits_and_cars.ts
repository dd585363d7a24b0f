import type { Knex } from 'knex'
import { protectTenantTable } from './lib/tenant'

/**
 * Circuits, layouts and timing lines; cars and their setup revisions. Every reference carries team_id, so that no row
 * can point across teams.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table circuits (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null references teams (id) on delete cascade,
      name text not null check (name <> ''),
      time_zone text not null,
      notes text not null default '',
      created_at timestamptz not null default now(),
      unique (team_id, id)
    );
    create unique index circuits_name on circuits (team_id, lower(name));

    create table layouts (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null,
      circuit_id uuid not null,
      name text not null check (name <> ''),
      -- null: as most laps of a log go round
      direction text check (direction in ('clockwise', 'anticlockwise')),
      -- Closed path as interleaved float64 x, y metres; null until laps are placed on one of their own.
      reference_line bytea,
      length_m double precision check (length_m > 0),
      -- Raised with every change of the lines, so that two people cannot overwrite each other unawares.
      lines_version integer not null default 0,
      created_at timestamptz not null default now(),
      unique (team_id, id),
      unique (team_id, circuit_id, id),
      foreign key (team_id, circuit_id) references circuits (team_id, id) on delete cascade
    );
    create unique index layouts_name on layouts (team_id, circuit_id, lower(name));

    create table timing_lines (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null,
      layout_id uuid not null,
      kind text not null check (kind in ('start_finish', 'sector')),
      ordinal integer not null check (ordinal >= 0 and (kind = 'start_finish') = (ordinal = 0)),
      a_latitude_deg double precision not null check (a_latitude_deg between -90 and 90),
      a_longitude_deg double precision not null check (a_longitude_deg between -180 and 180),
      b_latitude_deg double precision not null check (b_latitude_deg between -90 and 90),
      b_longitude_deg double precision not null check (b_longitude_deg between -180 and 180),
      unique (team_id, layout_id, ordinal),
      foreign key (team_id, layout_id) references layouts (team_id, id) on delete cascade
    );

    create table cars (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null references teams (id) on delete cascade,
      name text not null check (name <> ''),
      number text not null default '',
      year integer check (year between 1886 and 2100),
      kind text not null default '',
      notes text not null default '',
      created_at timestamptz not null default now(),
      unique (team_id, id)
    );
    create unique index cars_name on cars (team_id, lower(name));

    create table setup_revisions (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null,
      car_id uuid not null,
      number integer not null check (number >= 1),
      name text not null check (name <> ''),
      based_on_id uuid,
      sheet jsonb not null check (jsonb_typeof(sheet) = 'object'),
      created_by uuid,
      created_at timestamptz not null default now(),
      unique (team_id, id),
      unique (team_id, car_id, id),
      unique (team_id, car_id, number),
      foreign key (team_id, car_id) references cars (team_id, id) on delete cascade,
      -- The sheet that a sheet is based on is of the same car.
      foreign key (team_id, car_id, based_on_id) references setup_revisions (team_id, car_id, id)
        on delete set null (based_on_id),
      foreign key (team_id, created_by) references memberships (team_id, user_id) on delete set null (created_by)
    );
  `)
  await protectTenantTable(knex, 'circuits', ['owner', 'driver'])
  await protectTenantTable(knex, 'layouts', ['owner', 'driver'])
  await protectTenantTable(knex, 'timing_lines', ['owner', 'driver'])
  await protectTenantTable(knex, 'cars', ['owner', 'driver', 'crew'])
  await protectTenantTable(knex, 'setup_revisions', ['owner', 'driver', 'crew'])
  // A revision is a numbered state of the car: it can be named anew, and never changed.
  await knex.raw(`
    revoke update on setup_revisions from lapwright_app;
    grant update (name) on setup_revisions to lapwright_app;
  `)
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table setup_revisions, cars, timing_lines, layouts, circuits')
}
