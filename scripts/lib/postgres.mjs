// The project's own PostgreSQL cluster, on loopback, reached with passwords only.
import { createHash } from 'node:crypto'
import { chmodSync, chownSync, existsSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { randomText } from './env-file.mjs'
import { lastWords, tellsDiskFull } from './last-words.mjs'
import { shown } from './places.mjs'
import { requireFree } from './ports.mjs'
import { postgresPrograms } from './postgres-programs.mjs'
import { commandOf, isAlive } from './processes.mjs'
import { plainEnv, run } from './run.mjs'
import { fail, say } from './say.mjs'

const SHARED_HOME = '/var/lib/lapwright'
// A test cluster is thrown away, so nothing has to survive a power cut.
const THROWAWAY = { fsync: 'off', synchronous_commit: 'off', full_page_writes: 'off' }

const isRoot = () => process.getuid() === 0

/** Run a server program as the user the server belongs to: PostgreSQL refuses to run as root. */
function asServerUser(command, args, options = {}) {
  const words = isRoot() ? ['runuser', '-u', 'postgres', '--', command, ...args] : [command, ...args]
  return run(words[0], words.slice(1), { cwd: '/', env: plainEnv({ LC_ALL: 'C.UTF-8' }), ...options })
}

async function postgresUser() {
  const numberOf = async option => Number((await run('id', [option, 'postgres'])).out)
  const uid = await numberOf('-u'), gid = await numberOf('-g')
  if (!uid || !gid) {
    fail('PostgreSQL refuses to run as root and there is no user "postgres" for it: make one with "adduser --system --group postgres", or run this as an ordinary user.')
  }
  return { uid, gid }
}

function fallbackHome(wanted) {
  return join(SHARED_HOME, createHash('sha256').update(wanted).digest('hex').slice(0, 12))
}

/**
 * The folder of the cluster. As root its files belong to user postgres, who must be able to enter every parent;
 * where that is not so, the cluster lives in a folder of its own under /var/lib.
 */
async function clusterHome(wanted) {
  if (!isRoot()) return wanted
  const reaches = (await asServerUser('test', ['-x', dirname(wanted)])).code === 0
  return reaches ? wanted : fallbackHome(wanted)
}

/** The cluster that lives for `wanted`, running or not. */
export async function clusterAt(wanted) {
  const home = await clusterHome(wanted)
  return {
    home, data: join(home, 'data'), log: join(home, 'server.log'), secret: join(home, 'superuser-password'),
    moved: home !== wanted,
  }
}

/** The running server of a cluster, or null; a pid file left by a crash names a process that is no server of ours. */
export function runningServer(cluster) {
  let lines
  try {
    lines = readFileSync(join(cluster.data, 'postmaster.pid'), 'utf8').split('\n')
  }
  catch {
    return null
  }
  const pid = Number(lines[0])
  const ours = isAlive(pid) && commandOf(pid).includes(cluster.data) && /postgres$/.test(commandOf(pid)[0])
  return ours ? { pid, port: Number(lines[3]) } : null
}

async function makeCluster(cluster, programs) {
  mkdirSync(cluster.home, { recursive: true })
  chmodSync(cluster.home, 0o700)
  if (cluster.moved) chmodSync(dirname(cluster.home), 0o755)
  writeFileSync(cluster.secret, randomText(32), { mode: 0o600 })
  writeFileSync(cluster.log, '', { mode: 0o600, flag: 'a' })
  if (isRoot()) {
    const { uid, gid } = await postgresUser()
    for (const path of [cluster.home, cluster.secret, cluster.log]) chownSync(path, uid, gid)
  }
  // Made beside its place and then renamed, so that an interrupted first run leaves nothing half made.
  const fresh = `${cluster.data}.new`
  rmSync(fresh, { recursive: true, force: true })
  const made = await asServerUser(join(programs, 'initdb'), [
    '--pgdata', fresh, '--username', 'postgres', '--pwfile', cluster.secret, '--auth', 'scram-sha-256',
    '--encoding', 'UTF8', '--locale', 'C.UTF-8', '--no-instructions', '--no-sync',
  ])
  if (made.code !== 0) stopFor(made.all, `PostgreSQL could not make its files in ${shown(cluster.home)}`)
  renameSync(fresh, cluster.data)
}

function stopFor(text, what) {
  if (tellsDiskFull(text)) fail(`${what} because the disk is full: free about 2 GB and try again.`)
  fail(`${what}: ${lastWords(text)}.`)
}

async function startServer(cluster, programs, port, throwaway) {
  rmSync(join(cluster.data, 'postmaster.pid'), { force: true })
  const settings = {
    listen_addresses: '127.0.0.1', port, unix_socket_directories: '\'\'', timezone: 'UTC', log_timezone: 'UTC',
    ...(throwaway ? THROWAWAY : {}),
  }
  const options = Object.entries(settings).map(([name, value]) => `-c ${name}=${value}`).join(' ')
  const start = () => asServerUser(join(programs, 'pg_ctl'), [
    'start', '-w', '-t', '120', '-s', '-D', cluster.data, '-l', cluster.log, '-o', options,
  ])
  const before = readFileSync(cluster.log, 'utf8').length
  if ((await start()).code === 0) return
  // The children of a server that was killed need a moment to notice.
  await sleep(2000)
  if ((await start()).code === 0) return
  stopFor(readFileSync(cluster.log, 'utf8').slice(before), `PostgreSQL did not start (see ${shown(cluster.log)})`)
}

/**
 * See that the cluster exists and answers on its port.
 * @param options.wanted folder for it
 * @param options.throwaway true for a cluster that tests throw away
 * @returns {Promise<{home: string, data: string, port: number, programs: string, superuser: string}>}
 * @throws a sentence
 */
export async function ensureCluster({ wanted, port, logFolder, throwaway = false }) {
  // The programs come first: installing them makes the user that the cluster belongs to.
  await postgresPrograms(logFolder)
  const cluster = await clusterAt(wanted)
  const versionFile = join(cluster.data, 'PG_VERSION')
  const exists = existsSync(versionFile) && existsSync(cluster.secret)
  const programs = await postgresPrograms(logFolder, exists ? Number(readFileSync(versionFile, 'utf8')) : undefined)
  const running = runningServer(cluster)
  if (running?.port !== port) {
    await requireFree(port, 'LAPWRIGHT_PG_PORT', 'PostgreSQL')
    if (running) await stopCluster(cluster, programs)
    if (!exists) await makeCluster(cluster, programs)
    say(exists ? 'Starting PostgreSQL ...' : 'Made a PostgreSQL cluster; starting it ...')
    await startServer(cluster, programs, port, throwaway)
  }
  if (cluster.moved && !throwaway) {
    say(`User postgres cannot enter ${dirname(wanted)}, so the database is in ${cluster.home}.`)
  }
  return { ...cluster, port, programs, superuser: readFileSync(cluster.secret, 'utf8').trim() }
}

/**
 * Stop the cluster's server.
 * @returns {Promise<boolean>} false when it was not running
 */
export async function stopCluster(cluster, programs) {
  const running = runningServer(cluster)
  if (!running) return false
  const folder = programs ?? dirname(commandOf(running.pid)[0])
  const words = ['stop', '-m', 'fast', '-w', '-t', '60', '-s', '-D', cluster.data]
  const stopped = await asServerUser(join(folder, 'pg_ctl'), words)
  if (stopped.code !== 0) stopFor(stopped.all, `PostgreSQL (process ${running.pid}) did not stop`)
  return true
}

/** Remove a cluster and all it holds. */
export async function removeCluster(wanted) {
  const cluster = await clusterAt(wanted)
  await stopCluster(cluster)
  rmSync(cluster.home, { recursive: true, force: true })
}
