import { setPriority } from 'node:os'
import process from 'node:process'
import { cutLayoutJob, giveUpCut } from '../utils/cut-work'
import { giveUpLog, readLogJob, waitAgain } from '../utils/log-work'
import { sweepUploads } from '../utils/sweep'
import { roles } from '../utils/roles'
import { runShutdown } from '../utils/shutdown'
import { startWorking } from '../utils/work'

/** Starts what LAPWRIGHT_ROLES names; a process that cannot do its work says so and ends. */
export default defineNitroPlugin(() => {
  process.on('uncaughtException', (error: NodeJS.ErrnoException) => {
    if (error.syscall === 'listen') {
      console.error(error.code === 'EADDRINUSE'
        ? `Port ${portOf(error)} is taken by another program. Stop that program, or choose another port with NITRO_PORT.`
        : `Port ${portOf(error)} cannot be had: ${error.message}.`)
    }
    // Nobody knows what such an error has left half done: the process ends, and its keeper starts a new one.
    else console.error('An error that nothing caught; the process ends:', error)
    process.exit(1)
  })
  followKeeper()
  process.once('SIGTERM', runShutdown)
  process.once('SIGINT', runShutdown)
  if (import.meta.prerender || !roles().includes('worker')) return
  // A page never waits for a log: where both want the processor, the web process comes first.
  if (!roles().includes('web')) setPriority(10)
  startWorking({
    'log-read': { run: readLogJob, again: waitAgain },
    'log-read-failed': { run: giveUpLog },
    'layout-cut': { run: cutLayoutJob },
    'layout-cut-failed': { run: giveUpCut },
  }).then(sweepUploads).catch((error: Error) => {
    console.error(`The worker could not start: ${error.message}`)
    process.exit(1)
  })
})

/** A process whose keeper was killed would hold its port for ever: it ends as if it had been asked to. */
function followKeeper(): void {
  const keeper = Number(process.env.LAPWRIGHT_KEEPER)
  if (!keeper) return
  setInterval(() => {
    if (process.ppid !== keeper) process.kill(process.pid, 'SIGTERM')
  }, 1000).unref()
}

function portOf(error: NodeJS.ErrnoException): string {
  return String((error as NodeJS.ErrnoException & { port?: number }).port ?? '')
}
