// The work of `npm run up` and `npm run down`.
import { join } from 'node:path'
import { ensureBuild } from './build.mjs'
import { ensureDemo, signInLines } from './demo.mjs'
import { ensurePackages, requireRoom } from './packages.mjs'
import { makePlaces, UP } from './places.mjs'
import { clusterAt, stopCluster } from './postgres.mjs'
import { takeLock } from './processes.mjs'
import { fail, say } from './say.mjs'
import { ensureServices, ensureSettings } from './services.mjs'
import { ensureServers, requireServerPorts, stopServers } from './servers.mjs'

const OUTPUT = '.output'

export async function up() {
  makePlaces(UP)
  const other = takeLock(join(UP.run, 'up.lock'), 'up.mjs')
  if (other) fail(`Another "npm run up" is at work in this folder (process ${other}): wait until it has finished.`)
  requireRoom()
  const settings = ensureSettings(UP)
  await requireServerPorts({ places: UP, settings, outputDir: OUTPUT })
  await ensurePackages(UP.log)
  const cluster = await ensureServices(UP, settings)
  const build = await ensureBuild({ buildDir: '.nuxt', outputDir: OUTPUT, logFolder: UP.log })
  await ensureServers({ places: UP, settings, outputDir: OUTPUT, build })
  await ensureDemo(UP, settings, cluster)
  say()
  say(`Lapwright is running at ${settings.LAPWRIGHT_PUBLIC_URL}`)
  const lines = signInLines(UP.demo)
  if (lines.length) say(`Sign in to the demonstration team with\n${lines.join('\n')}`)
  say('Stop it with: npm run down')
}

export async function down() {
  const stopped = await stopServers(UP, OUTPUT)
  const cluster = await clusterAt(UP.cluster)
  if (await stopCluster(cluster)) stopped.push('PostgreSQL')
  say(stopped.length ? `Stopped: ${stopped.join(', ')}.` : 'Nothing was running.')
}
