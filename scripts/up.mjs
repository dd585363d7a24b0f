// npm run up: everything from a fresh copy to a running Lapwright. Safe to repeat.
import { requireNode } from './lib/node-version.mjs'

requireNode()
const { main } = await import('./lib/say.mjs')
const { UP } = await import('./lib/places.mjs')
const { up } = await import('./lib/up.mjs')
await main(up, UP.errorLog)
