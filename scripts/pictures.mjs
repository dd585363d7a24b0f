// npm run pictures: makes the pictures of README.md anew, from the demonstration in a program of its own.
import { requireNode } from './lib/node-version.mjs'

requireNode()
const { main } = await import('./lib/say.mjs')
const { pictures } = await import('./lib/pictures-run.mjs')
await main(pictures)
