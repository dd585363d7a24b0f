// The parts of `npm test` and what each of them counts.
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { join, relative } from 'node:path'
import { ROOT } from './places.mjs'
import { plainEnv, run } from './run.mjs'

export const PARTS = ['lint', 'types', 'unit', 'nuxt', 'api', 'e2e']
/** Parts that ask the built servers. */
export const SERVED = new Set(['api', 'e2e'])
/** Parts that read what `nuxt prepare` writes. */
export const PREPARED = new Set(['lint', 'types'])

/**
 * Which parts and which files were asked for.
 * @returns {{parts: string[], files: string[], unknown: string[]}} all parts when none is named
 */
export function partsAsked(words) {
  const parts = PARTS.filter(part => words.includes(part))
  const files = words.filter(word => /[./]/.test(word))
  const unknown = words.filter(word => !PARTS.includes(word) && !files.includes(word))
  return { parts: parts.length ? parts : PARTS, files, unknown }
}

/**
 * Passed, failed and skipped tests in vitest's JSON report. A file that could not be read into tests counts as one
 * failure, because none of its tests ran.
 */
export function countReport(report) {
  const broken = (report.testResults ?? [])
    .filter(file => file.status === 'failed' && !file.assertionResults.some(each => each.status === 'failed')).length
  return {
    passed: report.numPassedTests ?? 0,
    failed: (report.numFailedTests ?? 0) + broken,
    skipped: (report.numPendingTests ?? 0) + (report.numTodoTests ?? 0),
  }
}

/** Sums over parts; a part that failed without naming a failed test (lint, types, a crash) counts as one. */
export function sumUp(results) {
  const sum = { passed: 0, failed: 0 }
  for (const { ok, passed = 0, failed = 0 } of results) {
    sum.passed += passed
    sum.failed += ok ? failed : Math.max(1, failed)
  }
  return sum
}

const program = name => join(ROOT, 'node_modules', '.bin', name)

/** Write the types and the linter's globals of this build folder. */
export function prepare({ buildDir, log }) {
  const env = plainEnv({ LAPWRIGHT_BUILD_DIR: buildDir, NUXT_TELEMETRY_DISABLED: '1' })
  return run(program('nuxt'), ['prepare'], { cwd: ROOT, env, log })
}

function typesCommand({ home, buildDir }) {
  // What `nuxt typecheck` runs, on the build folder of the tests.
  const file = join(home, 'tsconfig.json'), folder = relative(home, join(ROOT, buildDir))
  const references = ['app', 'server', 'shared', 'node'].map(name => ({ path: `${folder}/tsconfig.${name}.json` }))
  writeFileSync(file, JSON.stringify({ files: [], references }))
  return [program('vue-tsc'), ['-b', '--noEmit', file]]
}

/** Colours are for terminals; a file or a pipe gets text. */
function plainText() {
  return process.stdout.isTTY ? {} : { NO_COLOR: '1', FORCE_COLOR: undefined }
}

/** Run one part, showing what it prints. */
export async function runPart(part, { home, buildDir, env, files }) {
  const partEnv = plainEnv({ LAPWRIGHT_BUILD_DIR: buildDir, ...plainText(), ...env })
  const show = { cwd: ROOT, env: partEnv, show: true }
  if (part === 'lint') return { ok: (await run(program('eslint'), ['.', '--max-warnings', '0'], show)).code === 0 }
  if (part === 'types') return { ok: (await run(...typesCommand({ home, buildDir }), show)).code === 0 }
  const report = join(home, `${part}.json`)
  const args = ['run', '--project', part, '--reporter=default', '--reporter=json', `--outputFile.json=${report}`, ...files]
  const { code } = await run(program('vitest'), args, show)
  const counts = existsSync(report) ? countReport(JSON.parse(readFileSync(report, 'utf8'))) : {}
  return { ok: code === 0 && (counts.passed ?? 0) > 0, ...counts }
}
