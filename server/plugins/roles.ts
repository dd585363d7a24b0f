import { setPriority } from 'node:os'
import process from 'node:process'
import { workOn } from '../utils/jobs'
import { cutLayoutJob, giveUpCut } from '../utils/cut-work'
import { giveUpLog, readLogJob } from '../utils/log-work'
import { sweepUploads } from '../utils/sweep'
import { roles } from '../utils/roles'
import { runShutdown } from '../utils/shutdown'

/** Starts what LAPWRIGHT_ROLES names; a process that cannot do its work says so and ends. */
export default defineNitroPlugin(() => {
  process.on('uncaughtException', (error: NodeJS.ErrnoException) => {
    if (error.syscall !== 'listen') return
    console.error(error.code === 'EADDRINUSE'
      ? `Port ${portOf(error)} is taken by another program. Stop that program, or choose another port with NITRO_PORT.`
      : `Port ${portOf(error)} cannot be had: ${error.message}.`)
    process.exit(1)
  })
  process.once('SIGTERM', runShutdown)
  process.once('SIGINT', runShutdown)
  if (import.meta.prerender || !roles().includes('worker')) return
  // A page never waits for a log: where both want the processor, the web process comes first.
  if (!roles().includes('web')) setPriority(10)
  const jobs = [
    workOn('log-read', readLogJob),
    workOn('log-read-failed', giveUpLog),
    workOn('layout-cut', cutLayoutJob),
    workOn('layout-cut-failed', giveUpCut),
    sweepUploads(),
  ]
  Promise.all(jobs).catch((error: Error) => {
    console.error(`The worker could not start: ${error.message}`)
    process.exit(1)
  })
})

function portOf(error: NodeJS.ErrnoException): string {
  return String((error as NodeJS.ErrnoException & { port?: number }).port ?? '')
}
