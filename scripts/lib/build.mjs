// Building the application, only when something it is made from has changed.
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { join, relative } from 'node:path'
import { lastWords, tellsDiskFull } from './last-words.mjs'
import { ROOT, shown } from './places.mjs'
import { plainEnv, run } from './run.mjs'
import { fail, say } from './say.mjs'

/** Top-level names that no build reads. */
const NOT_BUILT = new Set([
  'node_modules', 'storage', 'fixtures', 'tests', 'scripts', 'migrations', 'look', 'knexfile.ts', 'vitest.config.ts',
  'eslint.config.mjs',
])
const STAMP = '.lapwright-build'

function* sourceFiles(folder) {
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    const top = folder === ROOT
    if (top && (NOT_BUILT.has(entry.name) || entry.name.startsWith('.') || /\.(md|log)$/.test(entry.name))) continue
    const path = join(folder, entry.name)
    if (entry.isDirectory()) yield* sourceFiles(path)
    else if (entry.isFile()) yield path
  }
}

/** A name for the state of all sources: the same for the same files, whenever they were written. */
export function sourcesHash() {
  const hash = createHash('sha256')
  for (const path of [...sourceFiles(ROOT)].sort()) {
    hash.update(`${relative(ROOT, path)}\0`).update(readFileSync(path)).update('\0')
  }
  return hash.update(process.versions.node).digest('hex').slice(0, 16)
}

/** The name of the sources that a finished build was made from, or an empty text. */
export function builtHash(outputDir) {
  const stamp = join(ROOT, outputDir, STAMP)
  return existsSync(stamp) ? readFileSync(stamp, 'utf8') : ''
}

/**
 * See that `outputDir` holds a build of the present sources. It is made beside its place and then moved there, so
 * that servers of the old build go on while it is made, and an interrupted build leaves nothing half made.
 * @returns {Promise<string>} the build's name
 * @throws a sentence
 */
export async function ensureBuild({ buildDir, outputDir, logFolder }) {
  const wanted = sourcesHash()
  if (builtHash(outputDir) === wanted) return wanted
  say('Building (about half a minute) ...')
  const log = join(logFolder, 'build.log'), fresh = `${outputDir}-next`
  rmSync(log, { force: true })
  rmSync(join(ROOT, fresh), { recursive: true, force: true })
  const env = plainEnv({
    LAPWRIGHT_BUILD_DIR: buildDir, LAPWRIGHT_OUTPUT_DIR: fresh, NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1',
  })
  const result = await run(join(ROOT, 'node_modules', '.bin', 'nuxt'), ['build'], { cwd: ROOT, env, log })
  if (result.code !== 0 || !existsSync(join(ROOT, fresh, 'server', 'index.mjs'))) {
    rmSync(join(ROOT, fresh), { recursive: true, force: true })
    if (tellsDiskFull(result.all)) fail('The disk became full while building: free about 2 GB and try again.')
    fail(`The application could not be built: ${lastWords(result.all)} (see ${shown(log)}).`)
  }
  writeFileSync(join(ROOT, fresh, STAMP), wanted)
  rmSync(join(ROOT, outputDir), { recursive: true, force: true })
  renameSync(join(ROOT, fresh), join(ROOT, outputDir))
  return wanted
}
