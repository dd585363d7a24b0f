// The browser for tests, measurements and pictures.
import { existsSync } from 'node:fs'
import { aptInstall } from './apt.mjs'
import { say } from './say.mjs'

const CHROMIUM = '/usr/bin/chromium'

/** See that Chromium is there, from Debian's packages. */
export async function needChromium(why, logFolder) {
  if (existsSync(CHROMIUM)) return
  say('Installing Chromium from Debian ...')
  await aptInstall(['chromium'], { why, logFolder })
}
