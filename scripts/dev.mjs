// npm run dev: PostgreSQL and the current schema, then Nuxt's development server in the foreground.
// node scripts/dev.mjs --services: the same without the server; PostgreSQL stays up until `npm run down`.
import { requireNode } from './lib/node-version.mjs'

requireNode()
const { main } = await import('./lib/say.mjs')
const { UP } = await import('./lib/places.mjs')
const { dev } = await import('./lib/dev.mjs')
await main(() => dev(process.argv.slice(2)), UP.errorLog)
