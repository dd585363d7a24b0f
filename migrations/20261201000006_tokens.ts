import type { Knex } from 'knex'

/** Personal tokens, by which programs ask in the name of a person. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table api_tokens (
      id uuid primary key default app.uuid_v7(),
      user_id uuid not null references users (id) on delete cascade,
      name text not null check (name <> ''),
      -- sha256 of the token; the token itself is shown once and kept nowhere.
      hash text not null unique check (hash ~ '^[0-9a-f]{64}$'),
      ending text not null check (length(ending) = 4),
      created_at timestamptz not null default now(),
      last_used_at timestamptz,
      expires_at timestamptz
    );
    create index api_tokens_user on api_tokens (user_id);
    alter table api_tokens enable row level security;
    create policy api_tokens_own on api_tokens to lapwright_app
      using (user_id = app.user_id()) with check (user_id = app.user_id());
    -- The hash can be written and never read.
    grant select (id, user_id, name, ending, created_at, last_used_at, expires_at), delete on api_tokens to lapwright_app;
    grant insert (user_id, name, hash, ending, expires_at) on api_tokens to lapwright_app;

    -- Whose token this is; before there is a person, hence of the owner. The last use is noted once a minute, or every
    -- request of a busy program would write.
    create function app.use_token(token_hash text) returns table (user_id uuid, session_epoch integer)
      language plpgsql volatile security definer set search_path = public, pg_temp as $$
      begin
        update api_tokens t set last_used_at = now()
          where t.hash = token_hash and (t.last_used_at is null or t.last_used_at < now() - interval '1 minute')
            and (t.expires_at is null or t.expires_at > now());
        return query select u.id, u.session_epoch from api_tokens t join users u on u.id = t.user_id
          where t.hash = token_hash and (t.expires_at is null or t.expires_at > now());
      end
    $$;
    revoke execute on function app.use_token from public;
    grant execute on function app.use_token to lapwright_app;
  `)
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop function app.use_token; drop table api_tokens')
}
