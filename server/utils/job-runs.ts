import type { Transaction } from './db/transactions'
import { asNobody, asTeam } from './db/transactions'
import { jobQueue, through, type JobName, type Jobs } from './jobs'

/** A put back never waits long for a row, so that of two who want the same rows it is the one to give way. */
const PATIENCE = '300ms'

/** One try of a job by one worker. The next try of the same job has another count. */
export interface Run<N extends JobName = JobName> {
  name: N
  id: string
  retryCount: number
  data: Jobs[N]
}

/** The job is another worker's by now, and what this one found must not be kept. */
export class LostRunError extends Error {
  constructor() {
    super('the job was given to another worker')
    this.name = 'LostRunError'
  }
}

/** The next job of a queue, or undefined: also while the database is away. */
export async function fetchRun<N extends JobName>(name: N): Promise<Run<N> | undefined> {
  const boss = await jobQueue()
  const [job] = await boss.fetch<Jobs[N]>(name, { batchSize: 1, includeMetadata: true })
  return job && { name, id: job.id, retryCount: job.retryCount, data: job.data }
}

/** Whether a run is still the one that may write; with a lock it stays so until the transaction ends. */
export async function isOurs(db: Transaction, run: Run, lock: '' | 'for share' | 'for update' = ''): Promise<boolean> {
  const { rows } = await db.raw<{ rows: unknown[] }>(`select 1 from pgboss.job
    where name = ? and id = ? and state = 'active' and retry_count = ? ${lock}`, [run.name, run.id, run.retryCount])
  return rows.length > 0
}

/**
 * The last word of a transaction that writes what a job has found: a worker that was wrongly given up, or slept through
 * its job being done by another, writes nothing.
 * @throws {LostRunError}
 */
export async function mustBeOurs(db: Transaction, run: Run): Promise<void> {
  if (!await isOurs(db, run, 'for share')) throw new LostRunError()
}

/** A job is done; one that another worker has by now is left to that one. */
export async function completeRun(run: Run): Promise<void> {
  const boss = await jobQueue()
  await asNobody(async (db) => {
    if (await isOurs(db, run, 'for update')) await boss.complete(run.name, run.id, {}, { db: await through(db) })
  })
}

/** What is written down with a job that begins again; what it returns is done when that is certain. */
export type Again<N extends JobName = JobName>
  = (db: Transaction, data: Jobs[N]) => Promise<(() => Promise<void>) | undefined>

/**
 * Puts a job back after a run that failed or was lost. It counts as a try: a job that kills its workers is given up in
 * the end.
 * @returns false when the run has ended meanwhile, or its rows are being written at this very moment
 */
export async function putBack<N extends JobName>(run: Run<N>, why: string, again?: Again<N>): Promise<boolean> {
  const boss = await jobQueue()
  try {
    const then = await asTeam(run.data.teamId, async (db) => {
      await db.raw(`set local lock_timeout = '${PATIENCE}'`)
      if (!await isOurs(db, run, 'for update')) return false
      await boss.fail(run.name, run.id, { message: why }, { db: await through(db) })
      return again?.(db, run.data)
    })
    if (typeof then === 'function') await then()
    return then !== false
  }
  catch (error) {
    const LOCK_NOT_AVAILABLE = '55P03'
    if ((error as { code?: string }).code === LOCK_NOT_AVAILABLE) return false
    throw error
  }
}
