// npm run down: stops the web server, the worker and PostgreSQL of this folder. Safe to repeat; data is kept.
import { requireNode } from './lib/node-version.mjs'

requireNode()
const { main } = await import('./lib/say.mjs')
const { UP } = await import('./lib/places.mjs')
const { down } = await import('./lib/up.mjs')
await main(down, UP.errorLog)
