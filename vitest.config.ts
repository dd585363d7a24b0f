import { fileURLToPath } from 'node:url'
import { defineVitestProject } from '@nuxt/test-utils/config'
import { defineConfig, type TestProjectConfiguration } from 'vitest/config'
import { readEnvFile } from './scripts/lib/env-file.mjs'

// The development server keeps `.nuxt` to itself.
process.env.LAPWRIGHT_BUILD_DIR ??= '.nuxt-test'

const root = fileURLToPath(new URL('.', import.meta.url))
const alias = { '#shared': `${root}shared`, '~': root.slice(0, -1) }

/** Where the servers under test are: from `npm test`, or left by `node scripts/test.mjs servers`. */
function serversUnderTest(): Record<string, string> {
  return readEnvFile(`${root}.lapwright-test/${process.env.LAPWRIGHT_TEST_NAME || 'main'}/test.env`)
}

/** Starting Nuxt takes seconds, so it is left out of runs that name other projects or files of other folders. */
function wantsNuxt(): boolean {
  const words = process.argv.slice(2).join(' ')
  const names = [...words.matchAll(/--project[ =](\S+)/g)].map(match => match[1])
  if (names.length) return names.includes('nuxt')
  return !/\btests\/(?:unit|api|e2e)\b/.test(words) || words.includes('tests/nuxt')
}

async function projects(): Promise<TestProjectConfiguration[]> {
  const env = serversUnderTest()
  return [
    {
      resolve: { alias },
      test: { name: 'unit', include: ['tests/unit/**/*.spec.ts'], environment: 'node' },
    },
    {
      resolve: { alias },
      // Routes share one database: each file makes its own team, and few files run at once.
      test: {
        name: 'api', include: ['tests/api/**/*.spec.ts'], environment: 'node', env,
        maxWorkers: 2, testTimeout: 30_000, hookTimeout: 60_000,
      },
    },
    {
      resolve: { alias },
      // Two browsers at a time, as many as the machines have processors.
      test: {
        name: 'e2e', include: ['tests/e2e/**/*.spec.ts'], environment: 'node', env,
        maxWorkers: 2, testTimeout: 180_000, hookTimeout: 120_000,
      },
    },
    ...(wantsNuxt() ? [await nuxtProject()] : []),
  ]
}

function nuxtProject() {
  return defineVitestProject({
    // The same module under its newer name: the old one prints a warning.
    resolve: { alias: { 'vitest/environments': 'vitest/runtime' } },
    test: {
      name: 'nuxt', include: ['tests/nuxt/**/*.spec.ts'], environment: 'nuxt',
      // Starting Nuxt takes more than the usual ten seconds on a busy machine.
      hookTimeout: 60_000,
      environmentOptions: { nuxt: { domEnvironment: 'happy-dom' } },
    },
  })
}

export default defineConfig({ test: { projects: await projects() } })
