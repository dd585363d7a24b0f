// The web and the worker process of one build.
import { createHash } from 'node:crypto'
import { existsSync, readFileSync, rmSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { lastWords } from './last-words.mjs'
import { ROOT, shown } from './places.mjs'
import { requireFree } from './ports.mjs'
import { endProcess, isAlive, readPidFile, writePidFile } from './processes.mjs'
import { plainEnv, startDetached } from './run.mjs'
import { fail, say } from './say.mjs'

export const SERVERS = [
  { role: 'web', what: 'the web server', variable: 'LAPWRIGHT_PORT' },
  { role: 'worker', what: 'the worker', variable: 'LAPWRIGHT_WORKER_PORT' },
]
const START_PATIENCE_MS = 120_000
/** What is started, stopped and noted is the keeper of each process, which starts it again when it is lost. */
const KEEPER = join(ROOT, 'scripts', 'keep.mjs')

function pidFileOf(places, role) {
  return join(places.run, `${role}.json`)
}

function entryOf(outputDir) {
  return join(ROOT, outputDir, 'server', 'index.mjs')
}

/** What a server process is told; the owner's access to the database is not for it. */
export function serverEnv(settings, { role, variable }) {
  return {
    NODE_ENV: 'production', NITRO_SHUTDOWN_TIMEOUT: '4000',
    ...settings,
    DATABASE_OWNER_URL: undefined,
    LAPWRIGHT_ROLES: role, NITRO_PORT: String(settings[variable]),
  }
}

/** A name for a build started with these settings: a server of another name has to be started again. */
export function editionOf(build, env) {
  return createHash('sha256').update(JSON.stringify([build, Object.entries(env).sort()])).digest('hex').slice(0, 16)
}

async function isHealthy(port) {
  try {
    const answer = await fetch(`http://127.0.0.1:${port}/api/health`, { signal: AbortSignal.timeout(2000) })
    await answer.arrayBuffer()
    return answer.status === 200
  }
  catch {
    return false
  }
}

async function waitUntilHealthy(server, pid, port, log, logStart) {
  const said = () => lastWords(readFileSync(log, 'utf8').slice(logStart))
  for (const until = Date.now() + START_PATIENCE_MS; Date.now() < until; await sleep(150)) {
    if (await isHealthy(port)) return
    if (!isAlive(pid)) fail(`${capital(server.what)} ended while it was starting: ${said()} (see ${shown(log)}).`)
  }
  fail(`${capital(server.what)} did not answer on port ${port} within two minutes: ${said()} (see ${shown(log)}).`)
}

const capital = text => text[0].toUpperCase() + text.slice(1)

/** Before the long work: @throws a sentence when a port that is not ours already is taken */
export async function requireServerPorts({ places, settings, outputDir }) {
  for (const { role, what, variable } of SERVERS) {
    const port = Number(settings[variable])
    if (readPidFile(pidFileOf(places, role), entryOf(outputDir))?.port !== port) await requireFree(port, variable, what)
  }
}

/**
 * See that both processes run this build with these settings; what already does is left alone.
 * @throws a sentence
 */
export async function ensureServers({ places, settings, outputDir, build }) {
  const entry = entryOf(outputDir), toStart = []
  for (const server of SERVERS) {
    const env = serverEnv(settings, server), edition = editionOf(build, env), port = Number(settings[server.variable])
    const running = readPidFile(pidFileOf(places, server.role), entry)
    if (running?.edition === edition && await isHealthy(port)) continue
    if (running) await endProcess(running.pid)
    toStart.push({ ...server, env, edition, port })
  }
  for (const server of toStart) await requireFree(server.port, server.variable, server.what)
  if (toStart.length) say(`Starting ${toStart.map(server => server.what).join(' and ')} ...`)
  const started = toStart.map((server) => {
    const log = join(places.log, `${server.role}.log`)
    const logStart = existsSync(log) ? statSync(log).size : 0
    const pid = startDetached(process.execPath, [KEEPER, entry], { cwd: ROOT, env: plainEnv(server.env), log })
    if (!pid) fail(`${capital(server.what)} could not be started: ${process.execPath} did not run.`)
    writePidFile(pidFileOf(places, server.role), pid, { edition: server.edition, port: server.port })
    return { ...server, pid, log, logStart }
  })
  await Promise.all(started.map(each => waitUntilHealthy(each, each.pid, each.port, each.log, each.logStart)))
}

/**
 * Stop both processes.
 * @returns {Promise<string[]>} the roles that were running
 */
export async function stopServers(places, outputDir) {
  const stopped = await Promise.all(SERVERS.map(async ({ role }) => {
    const file = pidFileOf(places, role), running = readPidFile(file, entryOf(outputDir))
    if (running) await endProcess(running.pid)
    rmSync(file, { force: true })
    return running ? role : ''
  }))
  return stopped.filter(Boolean)
}
