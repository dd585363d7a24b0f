import { isHeld } from './db/holding'
import { pool } from './db/pool'
import { putBack, type Again, type Run } from './job-runs'
import type { JobName } from './jobs'
import { isDatabaseAway } from './problems'

const LOOK_EVERY_MS = 1500
/** A job is lost when nobody has held it for this long: a worker whose connection broke takes its locks sooner. */
const LOST_AFTER_MS = 4000

/** The lock by which a worker holds a run. */
export function lockOfRun({ id, retryCount }: Pick<Run, 'id' | 'retryCount'>): string {
  return `lapwright job ${id} ${retryCount}`
}
const LOCK_SQL = '\'lapwright job \' || j.id || \' \' || j.retry_count'

/**
 * Puts jobs back whose worker was lost, however it was lost. Should it live after all, it finds at its end that the job
 * is another's, and writes nothing (`mustBeOurs`).
 * @param again what is written down with each job that begins again
 * @returns stops looking
 */
export function watchForLostJobs(again: { [N in JobName]?: Again<N> }): () => void {
  const unheldSince = new Map<string, number>()
  const look = async () => {
    const { rows } = await pool().raw<{ rows: Run[] }>(`select j.id, j.name, j.retry_count as "retryCount", j.data
      from pgboss.job j where j.state = 'active' and j.name = any(?) and not ${isHeld(LOCK_SQL)}`, [Object.keys(again)])
    const now = Date.now()
    const locks = new Set(rows.map(lockOfRun))
    for (const lock of unheldSince.keys()) if (!locks.has(lock)) unheldSince.delete(lock)
    for (const run of rows) {
      const since = unheldSince.get(lockOfRun(run)) ?? now
      unheldSince.set(lockOfRun(run), since)
      if (now - since < LOST_AFTER_MS) continue
      if (await putBack(run, 'its worker was lost', again[run.name] as Again | undefined)) {
        console.error(`job ${run.name} ${run.id} begins again: its worker was lost in try ${run.retryCount + 1}`)
      }
    }
  }
  let looking = false
  const timer = setInterval(() => {
    if (looking) return
    looking = true
    // The database may be away: it is asked again the next time.
    void look().catch((error) => {
      if (!isDatabaseAway(error as Error)) console.error('looking for lost jobs:', error)
    }).finally(() => (looking = false))
  }, LOOK_EVERY_MS)
  return () => clearInterval(timer)
}
