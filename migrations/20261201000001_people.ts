import type { Knex } from 'knex'

/** Users, teams and memberships, and the functions that row-level security rests on. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create schema app;
    revoke all on schema app from public;
    grant usage on schema app to lapwright_app;
    revoke create on schema public from public;
    grant usage on schema public to lapwright_app;

    -- Version 7 of RFC 9562: 48 bits of milliseconds, then random; rows then lie on disk in the order of their making.
    create function app.uuid_v7() returns uuid language sql volatile as $$
      select encode(set_bit(set_bit(overlay(uuid_send(gen_random_uuid())
        placing substring(int8send(floor(extract(epoch from clock_timestamp()) * 1000)::bigint) from 3)
        from 1 for 6), 52, 1), 53, 1), 'hex')::uuid
    $$;

    create table users (
      id uuid primary key default app.uuid_v7(),
      name text not null check (name <> ''),
      email text not null check (email = lower(email)),
      password_hash text not null,
      -- Raised when the password changes; a session that carries an older one has ended.
      session_epoch integer not null default 1,
      created_at timestamptz not null default now()
    );
    create unique index users_email on users (email);

    create table teams (
      id uuid primary key default app.uuid_v7(),
      name text not null check (name <> ''),
      created_at timestamptz not null default now()
    );

    create table memberships (
      id uuid primary key default app.uuid_v7(),
      team_id uuid not null references teams (id) on delete cascade,
      user_id uuid not null references users (id) on delete restrict,
      role text not null check (role in ('owner', 'driver', 'coach', 'crew')),
      joined_at timestamptz not null default now(),
      -- A membership that has ended keeps its row: old laps keep their driver.
      left_at timestamptz,
      unique (team_id, user_id)
    );
    create index memberships_user on memberships (user_id);

    create function app.user_id() returns uuid language sql stable as $$
      select nullif(current_setting('lapwright.user_id', true), '')::uuid
    $$;

    -- Teams of the person of this transaction, or the one team of its job. A policy on memberships that asked
    -- memberships itself would recurse for ever, therefore SECURITY DEFINER.
    create function app.team_ids() returns setof uuid
      language sql stable security definer set search_path = public, pg_temp as $$
      select team_id from memberships where user_id = app.user_id() and left_at is null
      union all
      select nullif(current_setting('lapwright.team_id', true), '')::uuid
      where nullif(current_setting('lapwright.team_id', true), '') is not null
    $$;

    -- The same, of those teams in which the person has one of these roles.
    create function app.team_ids_as(roles text[]) returns setof uuid
      language sql stable security definer set search_path = public, pg_temp as $$
      select team_id from memberships where user_id = app.user_id() and left_at is null and role = any(roles)
      union all
      select nullif(current_setting('lapwright.team_id', true), '')::uuid
      where nullif(current_setting('lapwright.team_id', true), '') is not null
    $$;

    -- Registration and the look-up at sign-in happen before there is a person, so they are functions of the owner.
    create function app.register(new_name text, new_email text, new_password_hash text, new_team_name text)
      returns uuid language plpgsql security definer set search_path = public, pg_temp as $$
      declare
        new_user uuid;
        new_team uuid;
      begin
        insert into users (name, email, password_hash) values (new_name, lower(new_email), new_password_hash) returning id into new_user;
        insert into teams (name) values (new_team_name) returning id into new_team;
        insert into memberships (team_id, user_id, role) values (new_team, new_user, 'owner');
        return new_user;
      end
    $$;

    create function app.credentials(asked_email text)
      returns table (id uuid, password_hash text, session_epoch integer)
      language sql stable security definer set search_path = public, pg_temp as $$
      select id, password_hash, session_epoch from users where email = lower(asked_email)
    $$;

    create function app.my_password_hash() returns text
      language sql stable security definer set search_path = public, pg_temp as $$
      select password_hash from users where id = app.user_id()
    $$;

    -- Sets the password of the person of this transaction and ends every session; returns the new epoch.
    create function app.set_my_password(new_password_hash text) returns integer
      language sql volatile security definer set search_path = public, pg_temp as $$
      update users set password_hash = new_password_hash, session_epoch = session_epoch + 1
      where id = app.user_id() returning session_epoch
    $$;

    revoke execute on all functions in schema app from public;
    grant execute on all functions in schema app to lapwright_app;

    alter table users enable row level security;
    alter table teams enable row level security;
    alter table memberships enable row level security;

    create policy users_read on users for select to lapwright_app using (
      id = app.user_id()
      or id in (select m.user_id from memberships m where m.team_id = any(array(select app.team_ids())))
    );
    create policy users_change on users for update to lapwright_app
      using (id = app.user_id()) with check (id = app.user_id());
    create policy teams_read on teams for select to lapwright_app using (id = any(array(select app.team_ids())));
    create policy teams_change on teams for update to lapwright_app
      using (id = any(array(select app.team_ids_as('{owner}'))))
      with check (id = any(array(select app.team_ids_as('{owner}'))));
    create policy memberships_read on memberships for select to lapwright_app
      using (team_id = any(array(select app.team_ids())));
    create policy memberships_add on memberships for insert to lapwright_app
      with check (team_id = any(array(select app.team_ids_as('{owner}'))));
    create policy memberships_change on memberships for update to lapwright_app
      using (team_id = any(array(select app.team_ids_as('{owner}'))))
      with check (team_id = any(array(select app.team_ids_as('{owner}'))));

    -- The hash is not among the columns that the application may read.
    grant select (id, name, email, session_epoch, created_at), update (name) on users to lapwright_app;
    grant select, update (name) on teams to lapwright_app;
    grant select, insert, update (role, left_at) on memberships to lapwright_app;
  `)
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table memberships, teams, users cascade;
    drop schema app cascade;
  `)
}
