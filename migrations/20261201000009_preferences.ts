import type { Knex } from 'knex'

/**
 * How a person reads: units, the language in which figures are written, and the sheet. Everybody starts with what
 * strangers get. The policy of the table lets a person change their own row alone.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table users
      add column units text not null default 'metric' check (units in ('metric', 'imperial')),
      -- A tag of BCP 47; which ones there are is said by the application.
      add column number_language text not null default 'en-GB' check (number_language ~ '^[a-z]{2,3}(-[A-Z]{2}){0,1}$'),
      add column sheet text not null default 'device' check (sheet in ('paper', 'dark', 'device'));
    grant select (units, number_language, sheet), update (units, number_language, sheet) on users to lapwright_app;
  `)
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('alter table users drop column units, drop column number_language, drop column sheet')
}
