// The npm packages: installed when they are missing or when the lock file has changed.
import { createHash } from 'node:crypto'
import { existsSync, readFileSync, rmSync, statfsSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { npmReason } from './last-words.mjs'
import { ROOT, shown } from './places.mjs'
import { run } from './run.mjs'
import { fail, say } from './say.mjs'

const LOCK = join(ROOT, 'package-lock.json')
const MODULES = join(ROOT, 'node_modules')
const STAMP = join(MODULES, '.lapwright-lock')
const GIGABYTE = 1e9

/**
 * True when what npm noted as installed is what the lock file asks for; optional packages may be missing, because
 * they are of other machines.
 */
export function installedMatches(lock, installed) {
  return Object.entries(lock.packages ?? {}).every(([path, wanted]) => {
    if (path === '') return true
    const there = installed.packages?.[path]
    if (!there) return Boolean(wanted.optional || wanted.devOptional || wanted.peer)
    return there.version === wanted.version && there.integrity === wanted.integrity
  })
}

function isInstalled(lockText, hash) {
  if (existsSync(STAMP) && readFileSync(STAMP, 'utf8') === hash) return true
  const noted = join(MODULES, '.package-lock.json')
  if (!existsSync(noted)) return false
  const same = installedMatches(JSON.parse(lockText), JSON.parse(readFileSync(noted, 'utf8')))
  if (same) writeFileSync(STAMP, hash)
  return same
}

/** @throws a sentence when the disk has too little room: about 2 GB before the first installation, less later */
export function requireRoom() {
  const { bavail, bsize } = statfsSync(ROOT)
  const free = bavail * bsize, needed = existsSync(STAMP) ? 0.3 * GIGABYTE : 2 * GIGABYTE
  if (free >= needed) return
  fail(`The disk has ${(free / GIGABYTE).toFixed(1)} GB free and Lapwright needs about ${needed / GIGABYTE} GB `
    + `in ${ROOT}: free some space and try again.`)
}

/** See that the packages of the lock file are installed. */
export async function ensurePackages(logFolder) {
  if (!existsSync(LOCK)) {
    fail(`package-lock.json is missing in ${ROOT}: get a complete copy of the project and try again.`)
  }
  const lockText = readFileSync(LOCK, 'utf8')
  const hash = createHash('sha256').update(lockText).digest('hex')
  if (isInstalled(lockText, hash)) return
  const log = join(logFolder, 'npm.log')
  rmSync(log, { force: true })
  say('Installing packages (one to two minutes) ...')
  // NODE_ENV=production around us would leave the build tools out.
  const words = ['ci', '--include=dev', '--no-audit', '--no-fund', '--no-progress', '--loglevel=error']
  // npm's own settings may stand in the environment, so it gets all of it.
  const result = await run('npm', words, { cwd: ROOT, env: process.env, log })
  if (result.code === 127) fail('npm was not found: install npm and try again.')
  if (result.code !== 0) {
    fail(`npm could not install the packages: ${npmReason(result.all)} (see ${shown(log)}); put that right and try again.`)
  }
  writeFileSync(STAMP, hash)
}
