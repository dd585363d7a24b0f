import { fileURLToPath } from 'node:url'
import type { Knex } from 'knex'

/**
 * Migrations run as the owner of the database; the application itself connects as a role that owns nothing.
 * By hand: `npx tsx --env-file=.lapwright/env node_modules/.bin/knex migrate:status`
 */
const config: Knex.Config = {
  client: 'pg',
  connection: process.env.DATABASE_OWNER_URL,
  pool: { min: 0, max: 2 },
  migrations: {
    directory: fileURLToPath(new URL('./migrations', import.meta.url)),
    extension: 'ts',
    loadExtensions: ['.ts'],
  },
}

export default config
