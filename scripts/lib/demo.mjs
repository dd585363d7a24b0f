// The demonstration team: put in when nobody has registered yet, and its sign-ins shown.
import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { hasUsers } from './database.mjs'
import { lastWords } from './last-words.mjs'
import { ROOT, shown } from './places.mjs'
import { fail, say } from './say.mjs'
import { runScript } from './services.mjs'

/** Seed the demonstration when the database is empty, or when the last attempt was interrupted. */
export async function ensureDemo(places, settings, cluster) {
  if (!existsSync(join(ROOT, 'scripts', 'seed.ts'))) return
  const unfinished = join(places.run, 'seeding')
  if (!existsSync(unfinished) && await hasUsers(cluster)) return
  say('Filling in the demonstration team ...')
  writeFileSync(unfinished, '')
  const log = join(places.log, 'seed.log')
  const url = `http://127.0.0.1:${settings.LAPWRIGHT_PORT}`
  const env = { ...settings, LAPWRIGHT_URL: url, LAPWRIGHT_DEMO_FILE: places.demo }
  const result = await runScript('seed.ts', env, log)
  if (result.code !== 0) {
    fail(`The demonstration team could not be filled in: ${lastWords(result.all)} (see ${shown(log)}); `
      + `the rest is running at ${url}.`)
  }
  rmSync(unfinished, { force: true })
}

/** Lines for the demonstration's sign-ins, from the file that the seed wrote. */
export function signInLines(file) {
  if (!existsSync(file)) return []
  const read = JSON.parse(readFileSync(file, 'utf8'))
  const people = (Array.isArray(read) ? read : read.signIns ?? []).filter(person => person?.email && person?.password)
  const width = Math.max(0, ...people.map(person => person.email.length))
  return people.map(person => `  ${person.email.padEnd(width)}  ${person.password}${person.role ? `  (${person.role})` : ''}`)
}
