import PgBoss from 'pg-boss'
import { databaseUrl } from './db/pool'
import type { Transaction } from './db/transactions'

/**
 * The jobs of the worker. Each names its team, in whose name its queries run. A job that failed at its last try, or
 * whose worker was killed at it, comes back as the one of its name with `-failed`.
 */
export interface Jobs {
  'log-read': { teamId: string, logId: string }
  'log-read-failed': Jobs['log-read']
  'layout-cut': { teamId: string, layoutId: string }
  'layout-cut-failed': Jobs['layout-cut']
}
export type JobName = keyof Jobs

const held = globalThis as typeof globalThis & { lapwrightJobs?: Promise<PgBoss> }

/** The queue of this process. Its tables are made by the owner's migration, never here. */
export function jobQueue(options: { supervise: boolean } = { supervise: false }): Promise<PgBoss> {
  held.lapwrightJobs ??= startQueue(options.supervise).catch((error) => {
    // The database may be back at the next job; a failed start must not be remembered.
    held.lapwrightJobs = undefined
    throw error
  })
  return held.lapwrightJobs
}

async function startQueue(supervise: boolean): Promise<PgBoss> {
  const boss = new PgBoss({
    connectionString: databaseUrl(),
    application_name: 'lapwright jobs',
    max: 3,
    migrate: false,
    schedule: false,
    supervise,
    maintenanceIntervalSeconds: 10,
  })
  boss.on('error', error => console.error('job queue:', error.message))
  await boss.start()
  return boss
}

export async function stopJobQueue(): Promise<void> {
  const running = held.lapwrightJobs
  held.lapwrightJobs = undefined
  if (running) await (await running).stop({ graceful: false })
}

interface Connection { query: (text: string, values: unknown[]) => Promise<{ rows: unknown[] }> }

/** Lets the queue work inside a transaction of ours. */
export async function through(db: Transaction): Promise<{ executeSql: Connection['query'] }> {
  const connection = await db.client.acquireConnection() as Connection
  return { executeSql: (text, values) => connection.query(text, values) }
}

/** Sends a job inside a transaction: with it the job comes into being, or with it the job is rolled back. */
export async function sendJob<N extends JobName>(db: Transaction, name: N, data: Jobs[N]): Promise<void> {
  const boss = await jobQueue()
  await boss.send(name, data, { db: await through(db) })
}
