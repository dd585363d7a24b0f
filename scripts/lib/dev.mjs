// The work of `npm run dev`.
import { join } from 'node:path'
import { ensurePackages } from './packages.mjs'
import { makePlaces, ROOT, shown, UP } from './places.mjs'
import { requireFree } from './ports.mjs'
import { endRunning, plainEnv, run } from './run.mjs'
import { say } from './say.mjs'
import { ensureServices, ensureSettings } from './services.mjs'

export async function dev(args) {
  makePlaces(UP)
  await ensurePackages(UP.log)
  const settings = ensureSettings(UP)
  const port = Number(settings.LAPWRIGHT_PORT)
  await ensureServices(UP, settings)
  if (args.includes('--services')) {
    say(`PostgreSQL is running on 127.0.0.1:${settings.LAPWRIGHT_PG_PORT}; settings are in ${shown(UP.env)}.`)
    say('Stop it with: npm run down')
    return 0
  }
  await requireFree(port, 'LAPWRIGHT_PORT', 'the development server')
  const env = plainEnv({ ...settings, LAPWRIGHT_ROLES: 'web,worker' })
  // Ctrl-C reaches Nuxt through the terminal; this process only has to outlive it.
  process.on('SIGINT', () => {})
  process.on('SIGTERM', endRunning)
  const words = ['dev', '--host', '127.0.0.1', '--port', String(port)]
  const result = await run(join(ROOT, 'node_modules', '.bin', 'nuxt'), words, { cwd: ROOT, env, show: true, terminal: true })
  return result.code === 130 ? 0 : result.code
}
