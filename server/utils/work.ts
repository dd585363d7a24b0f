import process from 'node:process'
import { setTimeout as sleep } from 'node:timers/promises'
import { startHolding, type Holding } from './db/holding'
import { completeRun, fetchRun, LostRunError, putBack, type Again, type Run } from './job-runs'
import { jobQueue, type JobName, type Jobs } from './jobs'
import { lockOfRun, watchForLostJobs } from './lost-jobs'
import { isDatabaseAway } from './problems'

const POLL_MS = 500
const DATABASE_AGAIN_MS = 1000
/** What is nearly done may finish when the process is told to end. */
const FINISH_MS = 2500

export interface Work<N extends JobName> {
  run: (data: Jobs[N], run: Run<N>) => Promise<void>
  /** Written down when the job breaks off and begins again. */
  again?: Again<N>
}
export type Works = { [N in JobName]: Work<N> }

interface Working {
  works: Works
  holding: Holding
  stopWatching: () => void
  stopped: boolean
  running: Map<Run, Promise<void>>
}
const held = globalThis as typeof globalThis & { lapwrightWorking?: Working }

/** Takes jobs off each queue one at a time, and looks after those of lost workers, until the process ends. */
export async function startWorking(works: Works): Promise<void> {
  const names = Object.keys(works) as JobName[]
  await queueWhenThere()
  const again = Object.fromEntries(names.map(name => [name, works[name].again]))
  const working: Working = {
    works, holding: startHolding(), stopWatching: watchForLostJobs(again), stopped: false, running: new Map(),
  }
  held.lapwrightWorking = working
  for (const name of names) void takeJobs(working, name)
}

/** A worker without its database waits for it: it may be starting, too. */
async function queueWhenThere(): Promise<void> {
  for (let told = false; ; told = true) {
    try {
      await jobQueue({ supervise: true })
      return
    }
    catch (error) {
      if (!isDatabaseAway(error as Error)) throw error
      if (!told) console.error(`The worker waits for its database: ${(error as Error).message}`)
      await sleep(DATABASE_AGAIN_MS)
    }
  }
}

/** Takes no more jobs; what is not done in a moment is put back, for the next worker to begin at once. */
export async function stopWorking(): Promise<void> {
  const working = held.lapwrightWorking
  if (!working) return
  held.lapwrightWorking = undefined
  working.stopped = true
  working.stopWatching()
  await Promise.race([Promise.all(working.running.values()), sleep(FINISH_MS, undefined, { ref: false })])
  for (const run of working.running.keys()) {
    await putBack(run, 'its worker was stopped', working.works[run.name].again as Again | undefined).catch(() => undefined)
  }
  await working.holding.stop()
}

async function takeJobs<N extends JobName>(working: Working, name: N): Promise<void> {
  while (!working.stopped) {
    const run = await fetchRun(name).catch(() => undefined)
    if (!run) {
      await sleep(POLL_MS, undefined, { ref: false })
      continue
    }
    const done = carryOut(working, run, working.works[name])
    working.running.set(run, done)
    await done
    working.running.delete(run)
  }
}

/** One job, held from its beginning to its end. Never throws: what cannot be put back now is found to be lost. */
async function carryOut<N extends JobName>(working: Working, run: Run<N>, work: Work<N>): Promise<void> {
  const letGo = await working.holding.hold(lockOfRun(run))
  try {
    await work.run(run.data, run)
    await completeRun(run)
  }
  catch (error) {
    if (error instanceof LostRunError) console.error(`job ${run.name} ${run.id}: another worker has it by now`)
    else await breakOff(run, error as Error, work.again)
  }
  finally {
    await letGo()
  }
}

async function breakOff<N extends JobName>(run: Run<N>, error: Error, again?: Again<N>): Promise<void> {
  const what = isDatabaseAway(error) ? `the database was away (${error.message})` : error
  console.error(`job ${run.name} ${run.id}, try ${run.retryCount + 1} (process ${process.pid}):`, what)
  await putBack(run, error.message, again).catch(() => undefined)
}
