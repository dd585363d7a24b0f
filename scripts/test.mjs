// npm test: everything that can be checked, on a cluster, folders and ports of its own, so that it runs beside a
// running Lapwright. All it starts is stopped at the end, also after a failure or Ctrl-C.
//
//   npm test                           lint, types, unit, nuxt, api, e2e
//   npm test -- unit                   one part (or several): lint types unit nuxt api e2e
//   npm test -- api tests/api/x.spec.ts   one part, these files only
//   npm test -- servers                start the cluster and the built servers and keep them until Ctrl-C; meanwhile
//                                      `npx vitest run --project api tests/api/x.spec.ts` in another terminal uses them
//   LAPWRIGHT_TEST_NAME=other npm test ...   folders of another name, to run beside a test run of the same copy
import { requireNode } from './lib/node-version.mjs'

requireNode()
const { main } = await import('./lib/say.mjs')
const { test } = await import('./lib/test-run.mjs')
await main(() => test(process.argv.slice(2)))
