// npm run --silent bench [-- GROUP...]: measures the program and prints one JSON object a line on standard output:
// {"group":"pages","figure":"stall_p99_ms","value":84,"unit":"ms","baseline":"..."}; what it is doing goes to standard
// error. Groups that ask the program get a cluster, a database, folders and ports of their own, never those in use;
// all is put away at the end, also after a failure or Ctrl-C.
import { requireNode } from './lib/node-version.mjs'

requireNode()
const { main, speakOn } = await import('./lib/say.mjs')
speakOn(process.stderr)
const { bench } = await import('./lib/bench-run.mjs')
await main(() => bench(process.argv.slice(2)))
