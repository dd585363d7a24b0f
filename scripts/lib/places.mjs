// Where everything is.
import { chmodSync, mkdirSync, realpathSync } from 'node:fs'
import { dirname, join, relative } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The project's own folder. */
export const ROOT = realpathSync(join(dirname(fileURLToPath(import.meta.url)), '..', '..'))

/** The folders and files of one installation: `.lapwright` for up and dev, one of its own for the tests. */
export function placesIn(folder) {
  const home = join(ROOT, folder)
  return {
    home,
    cluster: join(home, 'postgres'),
    env: join(home, 'env'),
    demo: join(home, 'demo.json'),
    log: join(home, 'log'),
    run: join(home, 'run'),
    errorLog: join(home, 'log', 'error.log'),
  }
}

export const UP = placesIn('.lapwright')

/** Make the folders; others may pass through `home`, because PostgreSQL may run as another user. */
export function makePlaces(places) {
  for (const folder of [places.home, places.log, places.run]) mkdirSync(folder, { recursive: true })
  chmodSync(places.home, 0o755)
}

/** A path as the person in the project folder would write it. */
export function shown(path) {
  const inside = relative(ROOT, path)
  return inside && !inside.startsWith('..') ? inside : path
}
