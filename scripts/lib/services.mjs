// What every command needs before the application can run: folders, settings, PostgreSQL, the current schema.
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { ensureDatabase } from './database.mjs'
import { completeSettings, readEnvFile, writeEnvFile } from './env-file.mjs'
import { lastWords } from './last-words.mjs'
import { ROOT, shown } from './places.mjs'
import { ensureCluster } from './postgres.mjs'
import { plainEnv, run } from './run.mjs'
import { fail, say } from './say.mjs'

const TSX = join(ROOT, 'node_modules', '.bin', 'tsx')

/** Run one of the project's TypeScript scripts to its end, quietly. */
export async function runScript(name, env, log) {
  return run(TSX, [join('scripts', name)], { cwd: ROOT, env: plainEnv(env), log })
}

/** Settings from the file and the environment, written back. */
export function ensureSettings(places, environment = process.env) {
  const kept = readEnvFile(places.env), own = join(ROOT, 'storage')
  if (kept.LAPWRIGHT_STORAGE_DIR && !existsSync(kept.LAPWRIGHT_STORAGE_DIR)) {
    say(`The folder for logs ${kept.LAPWRIGHT_STORAGE_DIR} is not there; using ${own}.`)
    delete kept.LAPWRIGHT_STORAGE_DIR
  }
  const settings = completeSettings(kept, environment, own)
  writeEnvFile(places.env, settings)
  return settings
}

/** Bring the schema up to date as the owner. */
export async function migrate(settings, logFolder) {
  if (!existsSync(join(ROOT, 'scripts', 'migrate.ts'))) return
  const log = join(logFolder, 'migrate.log')
  const result = await runScript('migrate.ts', settings, log)
  if (result.code !== 0) fail(`The database could not be brought up to date: ${lastWords(result.all)} (see ${shown(log)}).`)
}

/**
 * PostgreSQL running, roles and database made, schema up to date.
 * @returns the cluster
 */
export async function ensureServices(places, settings, { throwaway = false } = {}) {
  const cluster = await ensureCluster({
    wanted: places.cluster, port: Number(settings.LAPWRIGHT_PG_PORT), logFolder: places.log, throwaway,
  })
  await ensureDatabase(cluster, settings)
  await migrate(settings, places.log)
  return cluster
}
