import type { Knex } from 'knex'
import { protectTenantTable } from './lib/tenant'

/** Track days and their outings. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table track_days (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null,
      circuit_id uuid not null,
      date date not null,
      name text not null default '',
      notes text not null default '',
      created_at timestamptz not null default now(),
      unique (team_id, id),
      unique (team_id, circuit_id, id),
      foreign key (team_id, circuit_id) references circuits (team_id, id) on delete restrict
    );
    create index track_days_date on track_days (team_id, date desc, id desc);

    create table outings (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null,
      day_id uuid not null,
      -- Stands here too, so that a layout of another circuit cannot be driven on this day.
      circuit_id uuid not null,
      number integer not null check (number >= 1),
      layout_id uuid not null,
      car_id uuid not null,
      setup_revision_id uuid not null,
      driver_id uuid not null,
      started_at timestamptz,
      fuel_start_l double precision check (fuel_start_l between 0 and 300),
      passenger boolean not null default false,
      conditions jsonb not null default '{}' check (jsonb_typeof(conditions) = 'object'),
      -- Measured on return; what came of the settings is of the outing, so that trials compare causes.
      hot_pressures jsonb not null default '{}' check (jsonb_typeof(hot_pressures) = 'object'),
      notes text not null default '',
      created_at timestamptz not null default now(),
      unique (team_id, id),
      unique (team_id, day_id, number),
      foreign key (team_id, circuit_id, day_id) references track_days (team_id, circuit_id, id) on delete cascade,
      foreign key (team_id, circuit_id, layout_id) references layouts (team_id, circuit_id, id) on delete restrict,
      foreign key (team_id, car_id) references cars (team_id, id) on delete restrict,
      foreign key (team_id, car_id, setup_revision_id) references setup_revisions (team_id, car_id, id) on delete restrict,
      foreign key (team_id, driver_id) references memberships (team_id, user_id) on delete restrict
    );
    create index outings_layout on outings (team_id, layout_id);
    create index outings_setup on outings (team_id, setup_revision_id);
  `)
  await protectTenantTable(knex, 'track_days', ['owner', 'driver'])
  await protectTenantTable(knex, 'outings', ['owner', 'driver', 'crew'])
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table outings, track_days')
}
