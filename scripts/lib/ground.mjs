// A ground of one's own for tests and measurements: cluster, folders, ports and a build, beside a running Lapwright.
import { chmodSync, existsSync, mkdirSync, readdirSync, rmSync } from 'node:fs'
import { basename, join } from 'node:path'
import { ensureBuild } from './build.mjs'
import { completeSettings, writeEnvFile } from './env-file.mjs'
import { makePlaces, placesIn, ROOT } from './places.mjs'
import { freePorts } from './ports.mjs'
import { removeCluster } from './postgres.mjs'
import { fail } from './say.mjs'
import { ensureServers, stopServers } from './servers.mjs'
import { ensureServices } from './services.mjs'

/**
 * Where everything of a ground lies; nothing is made yet.
 * @param use `test` or `bench`, part of every name
 * @param name keeps two runs of one use apart
 */
export function groundFor(use, name = 'main') {
  if (!/^[\w-]+$/.test(name)) fail(`"${name}" cannot name a folder: use letters, digits and hyphens.`)
  const suffix = name === 'main' ? '' : `-${name}`, folder = `.lapwright-${use}`
  const places = placesIn(join(folder, name))
  return {
    folder, places, buildDir: `.nuxt-${use}${suffix}`, outputDir: `.output-${use}${suffix}`,
    storage: join(places.home, 'storage'), envFile: join(places.home, `${use}.env`),
  }
}

/** Make the folders of a ground. */
export function makeGround({ folder, places }) {
  makePlaces(places)
  chmodSync(join(ROOT, folder), 0o755)
}

/** Stop and remove what this run, or one that was killed, has left: its tests' own servers among it. */
export async function clearGround({ folder, places, outputDir, storage, envFile }) {
  for (const name of existsSync(join(ROOT, folder)) ? readdirSync(join(ROOT, folder)) : []) {
    if (!name.startsWith(`${basename(places.home)}-own-`)) continue
    const own = placesIn(join(folder, name))
    await stopServers(own, outputDir)
    await removeCluster(own.cluster)
    rmSync(own.home, { recursive: true, force: true })
  }
  await stopServers(places, outputDir)
  await removeCluster(places.cluster)
  for (const path of [storage, envFile]) rmSync(path, { recursive: true, force: true })
}

/** Remove the build of a ground that is not used again soon. */
export function removeBuild({ outputDir, buildDir }) {
  for (const folder of [outputDir, buildDir]) rmSync(join(ROOT, folder), { recursive: true, force: true })
}

/**
 * Cluster, schema, build and both servers.
 * @returns the settings, with where the servers are
 */
export async function serveGround({ places, buildDir, outputDir, storage, envFile }) {
  const [web, worker, postgres] = await freePorts(3)
  const ports = { LAPWRIGHT_PORT: web, LAPWRIGHT_WORKER_PORT: worker, LAPWRIGHT_PG_PORT: postgres }
  mkdirSync(storage, { recursive: true })
  // As behind a proxy: a test that tries wrong passwords says from where, and does not use up the attempts of others.
  const settings = completeSettings({ LAPWRIGHT_TRUST_PROXY: '1' }, ports, storage)
  await ensureServices(places, settings, { throwaway: true })
  const build = await ensureBuild({ buildDir, outputDir, logFolder: places.log })
  await ensureServers({ places, settings, outputDir, build })
  const env = {
    ...settings,
    LAPWRIGHT_TEST_URL: `http://127.0.0.1:${web}`, LAPWRIGHT_TEST_WORKER_URL: `http://127.0.0.1:${worker}`,
    LAPWRIGHT_OUTPUT_DIR: join(ROOT, outputDir), LAPWRIGHT_TEST_RUN_DIR: places.run,
  }
  writeEnvFile(envFile, env)
  return env
}
