import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

const root = fileURLToPath(new URL('../../', import.meta.url))

function sources(folder: string): string[] {
  return readdirSync(root + folder, { recursive: true, encoding: 'utf8' })
    .filter(name => /\.(ts|vue|mjs)$/.test(name)).map(name => `${folder}/${name}`)
}

/** Modules that hold types or tables only; what uses them is tested. */
const WITHOUT_BEHAVIOUR = new Set(['server/utils/laps/types.ts', 'server/utils/laps/errors.ts', 'server/utils/laps/aliases.ts'])

describe('the house', () => {
  it('tests every module of the pipeline in a file of its own', () => {
    const untested = sources('server/utils/laps')
      .filter(file => !WITHOUT_BEHAVIOUR.has(file) && !existsSync(`${root}tests/unit/${file.replace(/\.ts$/, '.spec.ts')}`))
    expect(untested).toEqual([])
  })

  it('loads nothing from another host', () => {
    const foreign = ['pages', 'components', 'layouts', 'assets', 'app.vue', 'error.vue', 'nuxt.config.ts'].flatMap((place) => {
      const files = place.includes('.') ? [place] : readdirSync(root + place, { recursive: true, encoding: 'utf8' }).filter(name => /\.\w+$/.test(name)).map(name => `${place}/${name}`)
      return files.filter(file => /(?:src|href|url)\s*[=(:]\s*["'(]?https?:/i.test(readFileSync(root + file, 'utf8')))
    })
    expect(foreign).toEqual([])
  })

  it('writes every figure of a screen through useFigures, in the reader’s units and language', () => {
    const past = /\btoLocale\w+\(|Intl\.NumberFormat|\}\}? ?(?:m|km\/h|mph|bar|psi|°C|°F|N\/mm)[<`,. ]/
    expect(past.test('<td>{{ row.atM }} m</td>') && past.test('`${Math.round(speed)} km/h`')).toBe(true)
    const found = ['pages', 'components', 'layouts', 'composables'].flatMap(sources).flatMap(file =>
      readFileSync(root + file, 'utf8').split('\n').filter(line => past.test(line)).map(line => `${file}: ${line.trim()}`))
    expect(found).toEqual([])
  })

  it('names no path of a machine', () => {
    const named = ['server', 'shared', 'scripts', 'seeds', 'migrations', 'pages', 'components', 'composables', 'tests/api', 'tests/e2e', 'tests/support']
      .flatMap(sources).filter(file => /\/(?:work|root|home)\/[a-z]/.test(readFileSync(root + file, 'utf8')))
    expect(named).toEqual([])
  })
})
