// The work of `npm run pictures`.
import { rmSync } from 'node:fs'
import { join } from 'node:path'
import { needChromium } from './chromium.mjs'
import { clearGround, groundFor, makeGround, removeBuild, serveGround } from './ground.mjs'
import { lastWords } from './last-words.mjs'
import { ensurePackages, requireRoom } from './packages.mjs'
import { shown } from './places.mjs'
import { takeLock } from './processes.mjs'
import { fail, say } from './say.mjs'
import { runScript } from './services.mjs'

export async function pictures() {
  const ground = groundFor('pictures'), { places } = ground
  makeGround(ground)
  const other = takeLock(join(places.run, 'pictures.lock'), 'pictures.mjs')
  if (other) fail(`Pictures are being made in this folder already (process ${other}): wait for it.`)
  try {
    await clearGround(ground)
    requireRoom()
    await ensurePackages(places.log)
    await needChromium('Chromium is needed to make pictures', places.log)
    const env = await serveGround(ground)
    rmSync(places.demo, { force: true })
    const own = { ...env, LAPWRIGHT_URL: env.LAPWRIGHT_TEST_URL, LAPWRIGHT_DEMO_FILE: places.demo }
    const log = join(places.log, 'pictures.log')
    for (const script of ['seed.ts', 'take-pictures.ts']) {
      say(script === 'seed.ts' ? 'Filling in the demonstration team ...' : 'Taking the pictures ...')
      const { code, all } = await runScript(script, own, log)
      if (code !== 0) fail(`The pictures could not be made: ${lastWords(all)} (see ${shown(log)}).`)
    }
  }
  finally {
    await clearGround(ground)
    removeBuild(ground)
  }
}
