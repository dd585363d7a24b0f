// The roles and the database of Lapwright inside its cluster.
import { join } from 'node:path'
import { lastWords } from './last-words.mjs'
import { plainEnv, run } from './run.mjs'
import { fail } from './say.mjs'

/** Run SQL as the cluster's superuser; returns what psql prints, one row a line. */
export async function superuserSql(cluster, sql, database = 'postgres') {
  const args = ['--no-psqlrc', '--quiet', '--tuples-only', '--no-align', '--set', 'ON_ERROR_STOP=1',
    '-h', '127.0.0.1', '-p', String(cluster.port), '-U', 'postgres', '-d', database]
  // psql reads the password from its environment, where the command line would show it to everybody.
  const env = plainEnv({
    PGPASSWORD: cluster.superuser, PGCONNECT_TIMEOUT: '10', PGOPTIONS: '-c client_min_messages=warning',
    LC_ALL: 'C.UTF-8',
  })
  const result = await run(join(cluster.programs, 'psql'), args, { input: sql, env, cwd: '/' })
  if (result.code !== 0) fail(`The database could not be prepared: ${lastWords(result.all)}.`)
  return result.out.trim()
}

const ROLE_RIGHTS = 'login nosuperuser nocreatedb nocreaterole noreplication nobypassrls'

/** The SQL that makes, or puts right, one role. Passwords are letters and digits only. */
function roleSql(name, password) {
  return `select 'create role ${name}' where not exists (select from pg_roles where rolname = '${name}') \\gexec
alter role ${name} ${ROLE_RIGHTS} password '${password}';
`
}

function passwordOf(url) {
  const password = new URL(url).password
  if (!/^[A-Za-z0-9]+$/.test(password)) {
    fail('The database passwords in the env file may hold letters and digits only: change DATABASE_URL and DATABASE_OWNER_URL there.')
  }
  return password
}

/**
 * See that the roles and the database are there: `lapwright_owner` owns the database and is used by migrations,
 * `lapwright_app` owns nothing and is what the application connects as. Safe to repeat.
 */
export async function ensureDatabase(cluster, settings) {
  await superuserSql(cluster, `${roleSql('lapwright_owner', passwordOf(settings.DATABASE_OWNER_URL))}
${roleSql('lapwright_app', passwordOf(settings.DATABASE_URL))}
select 'create database lapwright owner lapwright_owner template template0 encoding ''UTF8'''
  where not exists (select from pg_database where datname = 'lapwright') \\gexec
revoke all on database lapwright from public;
grant connect on database lapwright to lapwright_app;
`)
}

/** True when somebody has registered. */
export async function hasUsers(cluster) {
  const found = await superuserSql(cluster, 'select to_regclass(\'public.users\') is not null;', 'lapwright')
  if (found !== 't') return false
  return await superuserSql(cluster, 'select exists (select from public.users);', 'lapwright') === 't'
}
