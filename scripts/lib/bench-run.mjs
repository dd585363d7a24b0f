// The work of `npm run bench`.
import { join } from 'node:path'
import { needChromium } from './chromium.mjs'
import { clearGround, groundFor, makeGround, removeBuild, serveGround } from './ground.mjs'
import { ensurePackages, requireRoom } from './packages.mjs'
import { ROOT } from './places.mjs'
import { takeLock } from './processes.mjs'
import { endRunning, plainEnv, run } from './run.mjs'
import { fail, say } from './say.mjs'

/** The groups in their order; `served` ones ask the built program, `browser` ones through Chromium. */
const GROUPS = {
  pages: { served: true, browser: true },
}

/**
 * Which groups were asked for; all when none is named.
 * @throws a sentence when there is no such group
 */
export function groupsAsked(words) {
  const names = Object.keys(GROUPS)
  const unknown = words.find(word => !names.includes(word))
  if (unknown) fail(`There is no group "${unknown}" to measure: name ${names.join(', ')}, or none for all of them.`)
  return words.length ? names.filter(name => words.includes(name)) : names
}

/** @returns {Promise<number>} the exit code */
export async function bench(words) {
  const groups = groupsAsked(words), ground = groundFor('bench'), stopping = { signal: '' }
  makeGround(ground)
  const other = takeLock(join(ground.places.run, 'bench.lock'), 'bench.mjs')
  if (other) fail(`Another measurement is at work in this folder (process ${other}): wait for it.`)
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
    process.on(signal, () => {
      stopping.signal = signal
      endRunning()
    })
  }
  try {
    await clearGround(ground)
    requireRoom()
    await ensurePackages(ground.places.log)
    return await measure(groups, ground, stopping)
  }
  catch (error) {
    if (!stopping.signal) throw error
    return 130
  }
  finally {
    await clearGround(ground)
    removeBuild(ground)
  }
}

async function measure(groups, ground, stopping) {
  let env, failed = false
  for (const group of groups) {
    if (stopping.signal) return 130
    const { served, browser } = GROUPS[group]
    if (browser) await needChromium('Chromium is needed to measure pages', ground.places.log)
    if (served) env ??= await serveGround(ground)
    say(`Measuring ${group} ...`)
    const { code, out, all } = await run(join(ROOT, 'node_modules', '.bin', 'tsx'), [join('scripts', 'bench', `${group}.ts`)], {
      cwd: ROOT, env: plainEnv({ ...env, LAPWRIGHT_BENCH_DIR: ground.places.home }), log: join(ground.places.log, 'bench.log'),
    })
    process.stdout.write(out)
    if (code !== 0) {
      failed = true
      say(`${group} could not be measured: ${all.trim().split('\n').at(-1)}`)
    }
  }
  return failed ? 1 : 0
}
