// node scripts/keep.mjs ENTRY: runs a server process and starts it again when it ends unasked. Of what it prints, lines
// that begin with "keeper:" are its own. SIGTERM and SIGINT end both. A process that cannot even start (a taken port, a
// wrong setting) has said why; that is not tried again. Once it has listened on its port the keeper never gives up.
import { spawn } from 'node:child_process'
import process from 'node:process'
import { listensOn } from './lib/ports.mjs'

/** After a life of this length the pauses begin small again. */
const STEADY_MS = 60_000
const LOOK_MS = 100
const [FIRST_PAUSE_MS, LONGEST_PAUSE_MS] = [500, 30_000]
/** Longer than a process takes to end (NITRO_SHUTDOWN_TIMEOUT), shorter than whoever stops the keeper waits. */
const ENDING_MS = 6000

const entry = process.argv[2]
const port = Number(process.env.NITRO_PORT)
let child, timer, stopping = false, hasListened = false, pauseMs = FIRST_PAUSE_MS

function start() {
  const began = Date.now()
  child = spawn(process.execPath, [entry], {
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, LAPWRIGHT_KEEPER: String(process.pid) },
  })
  const look = setInterval(() => {
    hasListened ||= listensOn(child.pid, port)
    if (hasListened) clearInterval(look)
  }, LOOK_MS)
  child.once('error', error => ended(error.message))
  child.once('exit', (code, signal) => ended(signal ?? `exit code ${code}`, code))

  function ended(how, code = null) {
    clearInterval(look)
    child = undefined
    if (stopping) process.exit(0)
    // Killed is not the same as unable to start.
    if (!hasListened && code !== null) process.exit(code || 1)
    if (Date.now() - began >= STEADY_MS) pauseMs = FIRST_PAUSE_MS
    console.error(`keeper: ${new Date().toISOString()} the process ended (${how}); it is started again in ${pauseMs / 1000} s`)
    timer = setTimeout(start, pauseMs)
    pauseMs = Math.min(2 * pauseMs, LONGEST_PAUSE_MS)
  }
}

for (const signal of ['SIGTERM', 'SIGINT']) {
  process.on(signal, () => {
    stopping = true
    clearTimeout(timer)
    if (!child) process.exit(0)
    child.kill('SIGTERM')
    setTimeout(() => child?.kill('SIGKILL'), ENDING_MS).unref()
  })
}
start()
