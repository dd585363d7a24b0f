import process from 'node:process'
import knex, { type Knex } from 'knex'
import pg from 'pg'

// bigint and date: figures below 2^53 as numbers, calendar dates as written (a Date would shift them by the time zone).
pg.types.setTypeParser(pg.types.builtins.INT8, Number)
pg.types.setTypeParser(pg.types.builtins.DATE, text => text)

const held = globalThis as typeof globalThis & { lapwrightPool?: Knex }

/** Where the application's database is: the role that owns nothing. */
export function databaseUrl(): string {
  const url = process.env.DATABASE_URL
  if (!url) throw new Error('DATABASE_URL is not set. `npm run up` sets it; a server started by hand takes it from its environment.')
  return url
}

/** The one pool of this process; kept on globalThis, or every hot reload would add one. */
export function pool(): Knex {
  held.lapwrightPool ??= knex({
    client: 'pg',
    connection: { connectionString: databaseUrl(), application_name: 'lapwright' },
    pool: { min: 0, max: 12 },
    acquireConnectionTimeout: 10_000,
  })
  return held.lapwrightPool
}

export async function closePool(): Promise<void> {
  const open = held.lapwrightPool
  held.lapwrightPool = undefined
  await open?.destroy()
}
