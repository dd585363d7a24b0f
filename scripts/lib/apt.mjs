// Installing Debian packages, as root or through sudo.
import { appendFileSync } from 'node:fs'
import { join } from 'node:path'
import { aptReason } from './last-words.mjs'
import { shown } from './places.mjs'
import { hasProgram, plainEnv, run } from './run.mjs'
import { fail, say } from './say.mjs'

const OPTIONS = ['DPkg::Lock::Timeout=120', 'Dpkg::Options::=--force-confdef', 'Dpkg::Options::=--force-confold']
  .flatMap(option => ['-o', option])

/**
 * How to run a program as root: itself, or with sudo before it.
 * @throws a sentence when there is no way to become root
 */
async function rootPrefix(packages, why) {
  if (process.getuid() === 0) return []
  const byHand = `ask an administrator to run "apt-get install ${packages.join(' ')}" and try again`
  if (!await hasProgram('sudo')) {
    fail(`${why} and this user may not install it (there is no sudo): ${byHand}.`)
  }
  if ((await run('sudo', ['-n', 'true'])).code === 0) return ['sudo', '-n']
  if (!process.stdin.isTTY) fail(`${why} and sudo wants a password that cannot be asked here: ${byHand}.`)
  say('Debian packages have to be installed; sudo may ask for your password.')
  if ((await run('sudo', ['-v'], { show: true, terminal: true })).code !== 0) {
    fail(`${why} and sudo did not let this user install it: ${byHand}.`)
  }
  return ['sudo']
}

/**
 * Install Debian packages; the package lists are fetched only when they are missing or too old to install from.
 * @param options.why first half of a sentence, such as 'PostgreSQL is needed'
 * @param options.before shell text that runs as root before the installation
 * @throws a sentence when apt-get fails
 */
export async function aptInstall(packages, { why, before, logFolder }) {
  if (!await hasProgram('apt-get')) {
    fail(`${why} and apt-get is not here to install it: install ${packages.join(' and ')} by hand and try again.`)
  }
  const prefix = await rootPrefix(packages, why)
  const log = join(logFolder, 'apt.log')
  const asRoot = (...words) => {
    const [command, ...args] = [...prefix, 'env', 'DEBIAN_FRONTEND=noninteractive', 'LC_ALL=C.UTF-8', ...words]
    appendFileSync(log, `\n# ${words.join(' ')}\n`)
    return run(command, args, { log, cwd: '/', env: plainEnv() })
  }
  const install = () => asRoot('apt-get', 'install', '-y', '--no-install-recommends', ...OPTIONS, ...packages)
  if (before) {
    const prepared = await asRoot('sh', '-c', before)
    if (prepared.code !== 0) {
      fail(`${why} but its installation could not be prepared: ${aptReason(prepared.all)} (see ${shown(log)}).`)
    }
  }
  const first = await install()
  if (first.code === 0) return
  const update = await asRoot('apt-get', 'update', ...OPTIONS)
  const second = await install()
  if (second.code === 0) return
  const reason = aptReason(`${update.all}\n${second.all}`)
  fail(`${why} but apt-get could not install it: ${reason} (see ${shown(log)}); put that right and try again.`)
}
