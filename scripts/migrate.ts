/** Brings the database to the newest migration, as its owner (DATABASE_OWNER_URL). */
import knex from 'knex'
import config from '../knexfile'

const database = knex(config)
try {
  const [, done] = await database.migrate.latest() as [number, string[]]
  if (done.length) console.log(`${done.length} ${done.length === 1 ? 'migration' : 'migrations'} run`)
}
finally {
  await database.destroy()
}
