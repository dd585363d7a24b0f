// The server programs of PostgreSQL: found, or installed from Debian.
import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { aptInstall } from './apt.mjs'
import { run } from './run.mjs'
import { fail, say } from './say.mjs'

export const OLDEST_POSTGRES = 15
const DEBIAN_FOLDER = '/usr/lib/postgresql'
const PROGRAMS = ['initdb', 'pg_ctl', 'postgres', 'psql']

// Debian's package makes and starts a cluster of its own unless it is told not to.
const NO_CLUSTER = `set -e
mkdir -p /etc/postgresql-common
file=/etc/postgresql-common/createcluster.conf
if [ -e "$file" ] && grep -q '^#* *create_main_cluster' "$file"
then sed -i 's/^#* *create_main_cluster.*/create_main_cluster = false/' "$file"
else echo 'create_main_cluster = false' >> "$file"
fi`

/** Majors that Debian's folder holds and that will do, newest first. */
export function usableMajors(names, oldest = OLDEST_POSTGRES) {
  return names.filter(name => /^\d+$/.test(name)).map(Number).filter(major => major >= oldest).sort((a, b) => b - a)
}

function isComplete(folder) {
  return PROGRAMS.every(program => existsSync(join(folder, program)))
}

async function inPath() {
  for (const folder of (process.env.PATH ?? '').split(':')) {
    if (!folder || !isComplete(folder)) continue
    const version = /(\d+)/.exec((await run(join(folder, 'postgres'), ['--version'])).out)?.[1]
    if (Number(version) >= OLDEST_POSTGRES) return [{ major: Number(version), folder }]
  }
  return []
}

async function findAll() {
  const names = existsSync(DEBIAN_FOLDER) ? readdirSync(DEBIAN_FOLDER) : []
  const debian = usableMajors(names)
    .map(major => ({ major, folder: join(DEBIAN_FOLDER, String(major), 'bin') }))
    .filter(({ folder }) => isComplete(folder))
  return debian.length ? debian : inPath()
}

/**
 * The folder with PostgreSQL's server programs, installed from Debian when there is none.
 * @param major the version that made an existing cluster, or undefined
 * @throws a sentence when it cannot be had
 */
export async function postgresPrograms(logFolder, major) {
  let found = await findAll()
  if (!found.length) {
    say('Installing PostgreSQL from Debian ...')
    await aptInstall(['postgresql'], { why: 'PostgreSQL is needed', before: NO_CLUSTER, logFolder })
    found = await findAll()
    if (!found.length) {
      fail(`Debian's PostgreSQL is older than ${OLDEST_POSTGRES}, which Lapwright needs: install PostgreSQL ${OLDEST_POSTGRES} or newer and try again.`)
    }
  }
  const chosen = major ? found.find(each => each.major === major) : found[0]
  if (!chosen) {
    fail(`The database was made by PostgreSQL ${major}, and only PostgreSQL ${found[0].major} is installed: `
      + `install postgresql-${major} and try again.`)
  }
  return chosen.folder
}
