// The work of `npm test`.
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { needChromium } from './chromium.mjs'
import { clearGround, groundFor, makeGround, serveGround } from './ground.mjs'
import { lastWords } from './last-words.mjs'
import { ensurePackages, requireRoom } from './packages.mjs'
import { ROOT, shown } from './places.mjs'
import { takeLock } from './processes.mjs'
import { endRunning } from './run.mjs'
import { fail, say, sentenceOf } from './say.mjs'
import { partsAsked, PREPARED, prepare, runPart, SERVED, sumUp } from './test-parts.mjs'
import { needTools } from './tools.mjs'

async function tryToServe(ground) {
  try {
    return { ok: true, env: await serveGround(ground) }
  }
  catch (error) {
    say(sentenceOf(error, ground.places.errorLog))
    return { ok: false }
  }
}

async function runParts(parts, files, ground, stopping) {
  const { places, buildDir } = ground, results = []
  const timed = async (part, work) => {
    const started = Date.now(), result = await work()
    results.push({ part, seconds: (Date.now() - started) / 1000, ...result })
    return result
  }
  let served
  for (const part of parts) {
    if (stopping.signal) break
    if (SERVED.has(part)) served ??= await timed('serve', () => tryToServe(ground))
    if (SERVED.has(part) && !served.ok) {
      results.push({ part, seconds: 0, ok: false, why: 'not run' })
      continue
    }
    say(`\n${part}`)
    await timed(part, () => runPart(part, { home: places.home, buildDir, env: served?.env, files }))
  }
  return results
}

function report(results, startedAt) {
  say()
  for (const { part, ok, why, passed, failed, skipped, seconds } of results) {
    const counts = passed === undefined ? '' : `${passed} passed, ${failed} failed${skipped ? `, ${skipped} skipped` : ''}`
    say(`${part.padEnd(6)} ${(why ?? (ok ? 'ok' : 'FAILED')).padEnd(8)} ${`${seconds.toFixed(1)} s`.padStart(8)}  ${counts}`.trimEnd())
  }
  const { passed, failed } = sumUp(results)
  say(`total  ${((Date.now() - startedAt) / 1000).toFixed(0)} s`)
  say(`${passed} passed, ${failed} failed`)
  return failed === 0 && results.every(result => result.ok) ? 0 : 1
}

function listen(stopping) {
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
    process.on(signal, () => {
      stopping.signal = signal
      endRunning()
    })
  }
}

async function prepareAll(parts, { places, buildDir }) {
  requireRoom()
  await ensurePackages(places.log)
  if (parts.includes('e2e')) await needChromium('Chromium is needed for the tests in the browser', places.log)
  if (parts.includes('api')) await needTools('curl and Python are needed for the examples of README.md', places.log)
  // tsconfig.json leads to `.nuxt`, which tools read even when it is not theirs.
  const folders = existsSync(join(ROOT, '.nuxt', 'tsconfig.json')) ? [] : ['.nuxt']
  if (parts.some(part => PREPARED.has(part))) folders.push(buildDir)
  const log = join(places.log, 'prepare.log')
  for (const folder of folders) {
    const prepared = await prepare({ buildDir: folder, log })
    if (prepared.code !== 0) fail(`Nuxt could not be prepared: ${lastWords(prepared.all)} (see ${shown(log)}).`)
  }
}

/** @returns {Promise<number>} the exit code */
export async function test(words) {
  const startedAt = Date.now(), stopping = { signal: '' }, ground = groundFor('test', process.env.LAPWRIGHT_TEST_NAME || undefined)
  const onlyServers = words.includes('servers')
  const { parts, files, unknown } = partsAsked(words.filter(word => word !== 'servers'))
  if (unknown.length) fail(`There is no part "${unknown[0]}": name lint, types, unit, nuxt, api, e2e or servers.`)
  makeGround(ground)
  const other = takeLock(join(ground.places.run, 'test.lock'), 'test.mjs')
  if (other) {
    fail(`A test run is at work in this folder (process ${other}): wait for it, `
      + 'or give this one another name with LAPWRIGHT_TEST_NAME=other.')
  }
  listen(stopping)
  try {
    await clearGround(ground)
    await prepareAll(onlyServers ? [] : parts, ground)
    if (!onlyServers) {
      const results = await runParts(parts, files, ground, stopping)
      return stopping.signal ? 130 : report(results, startedAt)
    }
    const env = await serveGround(ground)
    say(`The servers under test are running at ${env.LAPWRIGHT_TEST_URL}; settings are in ${shown(ground.envFile)}.`)
    say('Ctrl-C stops them.')
    while (!stopping.signal) await sleep(200)
    return 0
  }
  catch (error) {
    // What was interrupted fails, and that is no news.
    if (!stopping.signal) throw error
    return 130
  }
  finally {
    await clearGround(ground)
    if (stopping.signal) say('Stopped; nothing is left running.')
  }
}
