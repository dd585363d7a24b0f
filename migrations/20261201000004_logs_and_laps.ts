import type { Knex } from 'knex'
import { partitionByTeam, protectTenantTable } from './lib/tenant'

/** Uploaded logs with their channels, and the laps that were cut from them. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table logs (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null references teams (id) on delete cascade,
      file_name text not null,
      sha256 text check (sha256 ~ '^[0-9a-f]{64}$'),
      size_bytes bigint not null default 0,
      storage_key text not null unique,
      header_key text,
      preview jsonb,
      column_map jsonb,
      remembered boolean not null default false,
      status text not null default 'uploading' check (status in
        ('uploading', 'mapping', 'queued', 'processing', 'no_lines', 'ready', 'refused')),
      -- Why it was refused: code, message, row.
      problem jsonb,
      row_count integer,
      sample_count integer,
      rate_hz double precision,
      duration_s double precision,
      started_at timestamptz,
      -- What the reader met in the rows.
      problems jsonb not null default '[]',
      gaps jsonb not null default '[]',
      uploaded_by uuid,
      uploaded_at timestamptz not null default now(),
      unique (team_id, id),
      check (status = 'uploading' or sha256 is not null),
      foreign key (team_id, uploaded_by) references memberships (team_id, user_id) on delete set null (uploaded_by)
    );
    -- Uploads that a killed process left half done; their files go with the rows. Across teams, hence of the owner.
    create function app.sweep_uploads(older interval) returns setof text
      language sql volatile security definer set search_path = public, pg_temp as $$
      delete from logs where status = 'uploading' and uploaded_at < now() - older returning storage_key
    $$;
    revoke execute on function app.sweep_uploads from public;
    grant execute on function app.sweep_uploads to lapwright_app;

    -- The same bytes once a team; a file that was refused may come again.
    create unique index logs_sha256 on logs (team_id, sha256) where status not in ('uploading', 'refused');

    create table log_parts (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null,
      log_id uuid not null,
      outing_id uuid not null,
      -- null: from the first, to the last sample
      from_s double precision,
      to_s double precision,
      clock_offset_s double precision not null default 0,
      -- Its lines have changed, and the job that cuts it again has not done so yet.
      cut_pending boolean not null default false,
      -- What the cut had to say: lines never crossed, and the like.
      warnings jsonb not null default '[]',
      unique (team_id, id),
      check (to_s > from_s),
      foreign key (team_id, log_id) references logs (team_id, id) on delete cascade,
      foreign key (team_id, outing_id) references outings (team_id, id) on delete cascade
    );
    create index log_parts_log on log_parts (team_id, log_id);
    create index log_parts_outing on log_parts (team_id, outing_id);

    -- How a header was read the last time, so that nobody maps the same logger's columns twice.
    create table column_maps (
      team_id uuid not null references teams (id) on delete cascade,
      header_key text not null,
      column_map jsonb not null,
      updated_at timestamptz not null default now(),
      primary key (team_id, header_key)
    );

    create table channels (
      team_id uuid not null,
      log_id uuid not null,
      name text not null check (name ~ '^[a-z][a-z0-9_]{0,62}$'),
      ordinal integer not null,
      label text not null,
      unit text not null,
      rate_hz double precision not null,
      -- Little-endian samples: f64 for time, latitude and longitude, f32 for the rest.
      encoding text not null check (encoding in ('f64', 'f32')),
      samples bytea not null,
      primary key (team_id, log_id, name),
      foreign key (team_id, log_id) references logs (team_id, id) on delete cascade
    ) partition by hash (team_id);
    -- Uncompressed and out of line: then substring() reads a lap's slice without reading the rest.
    alter table channels alter column samples set storage external;

    create table laps (
      team_id uuid not null,
      id uuid not null default app.uuid_v7(),
      outing_id uuid not null,
      log_part_id uuid,
      number integer not null check (number >= 0),
      kind text not null check (kind in ('out', 'timed', 'in')),
      start_s double precision not null,
      time_s double precision not null check (time_s > 0),
      -- The lap's slice of the log: from the last sample before its start to the first after its end.
      first_sample integer check (first_sample >= 0),
      last_sample integer,
      check (last_sample > first_sample),
      flags jsonb not null default '[]',
      excluded boolean not null default false,
      excluded_reason text not null default '',
      primary key (team_id, id),
      -- Checked at commit: cutting again may give every lap another number at once.
      unique (team_id, log_part_id, number) deferrable initially deferred,
      check (excluded = (excluded_reason <> '')),
      foreign key (team_id, outing_id) references outings (team_id, id) on delete cascade,
      foreign key (team_id, log_part_id) references log_parts (team_id, id) on delete cascade
    ) partition by hash (team_id);
    create index laps_outing on laps (team_id, outing_id);

    create table lap_sectors (
      team_id uuid not null,
      lap_id uuid not null,
      ordinal integer not null check (ordinal >= 1),
      -- null where the line before or after was missed
      time_s double precision check (time_s > 0),
      primary key (team_id, lap_id, ordinal),
      foreign key (team_id, lap_id) references laps (team_id, id) on delete cascade
    ) partition by hash (team_id);
  `)
  for (const table of ['channels', 'laps', 'lap_sectors']) await partitionByTeam(knex, table)
  for (const table of ['logs', 'log_parts', 'column_maps']) {
    await protectTenantTable(knex, table, ['owner', 'driver', 'crew'])
  }
  await protectTenantTable(knex, 'laps', ['owner', 'driver'])
  // Written by the jobs of the team alone.
  for (const table of ['channels', 'lap_sectors']) await protectTenantTable(knex, table, [])
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop function app.sweep_uploads; drop table lap_sectors, laps, channels, column_maps, log_parts, logs')
}
