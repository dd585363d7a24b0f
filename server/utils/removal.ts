import {
  carStays, circuitStays, dayStays, layoutStays, outingStays, setupIsBase, setupStays, type Standing, type StandingLog,
} from '../../shared/removal-words'
import type { Transaction } from './db/transactions'
import { ProblemError } from './problems'

/** What keeps a row from being removed, in words, with the page that helps. */
interface Obstacle { detail: string, see: string }
type Look = (db: Transaction, id: string) => Promise<Obstacle | null>

interface Last extends Standing { id: string }

/** Outings by one of their references: how many, and the last. */
async function outingsBy(
  db: Transaction, column: 'layout_id' | 'car_id' | 'setup_revision_id', id: string,
): Promise<Last | undefined> {
  return db('outings as o').join('track_days as d', 'd.id', 'o.day_id').where(`o.${column}`, id)
    .orderBy([{ column: 'd.date', order: 'desc' }, { column: 'o.number', order: 'desc' }])
    .first<Last | undefined>('o.id', 'd.date as lastDate', db.raw('(count(*) over ())::int as count'))
}

function outings(column: Parameters<typeof outingsBy>[1], words: (standing: Standing) => string): Look {
  return async (db, id) => {
    const last = await outingsBy(db, column, id)
    return last ? { detail: words(last), see: `/outings/${last.id}` } : null
  }
}

async function lookAtSetup(db: Transaction, id: string): Promise<Obstacle | null> {
  const driven = await outings('setup_revision_id', setupStays)(db, id)
  if (driven) return driven
  const next = await db('setup_revisions').where('based_on_id', id).orderBy('number')
    .select<{ id: string, number: number }[]>('id', 'number')
  return next[0] ? { detail: setupIsBase(next.map(row => row.number)), see: `/setups/${next[0].id}` } : null
}

async function lookAtCircuit(db: Transaction, id: string): Promise<Obstacle | null> {
  const last = await db('track_days').where('circuit_id', id).orderBy('date', 'desc')
    .first<Last | undefined>('id', 'date as lastDate', db.raw('(count(*) over ())::int as count'))
  return last ? { detail: circuitStays(last), see: `/days/${last.id}` } : null
}

async function lookAtDay(db: Transaction, id: string): Promise<Obstacle | null> {
  const last = await db('outings').where('day_id', id).orderBy('number', 'desc')
    .first<{ id: string, count: number } | undefined>('id', db.raw('(count(*) over ())::int as count'))
  return last ? { detail: dayStays(last.count), see: `/outings/${last.id}` } : null
}

/** What can be removed when it was made by mistake, and what may stand on it. Whatever has laps is never taken away. */
const REMOVABLE = {
  // Its layouts and their lines go with a circuit, and its sheets with a car: no lap can stand on them then.
  circuits: lookAtCircuit,
  layouts: outings('layout_id', layoutStays),
  cars: outings('car_id', carStays),
  setup_revisions: lookAtSetup,
  track_days: lookAtDay,
} as const satisfies Record<string, Look>

/**
 * Removes one row.
 * @throws {ProblemError} 409 that names what stands on it
 */
export async function removeRow(db: Transaction, table: keyof typeof REMOVABLE, id: string): Promise<void> {
  const refuse = async () => {
    const obstacle = await REMOVABLE[table](db, id)
    if (obstacle) throw stillInUse(obstacle)
  }
  // Before the row is locked, since a job that cuts laps may hold it for a while; and again when nobody can add more.
  await refuse()
  await db(table).where('id', id).forUpdate().first('id')
  await refuse()
  await db(table).where('id', id).delete()
}

interface LogRow extends StandingLog { id: string, storageKey: string }

/** The logs of an outing with their laps, the first uploaded first. */
function logsOf(db: Transaction, outingId: string): Promise<LogRow[]> {
  return db('logs as g').join('log_parts as p', 'p.log_id', 'g.id').where('p.outing_id', outingId).orderBy('g.uploaded_at')
    .select<LogRow[]>('g.id', 'g.file_name as fileName', 'g.storage_key as storageKey',
      db.raw(`(select count(*)::int from laps l where l.team_id = p.team_id and l.log_part_id = p.id) as "lapCount"`))
}

/**
 * Removes an outing together with those of its logs that are named: what a person was told of before is what goes.
 * @returns the storage keys of the files, to be removed once the transaction is through
 * @throws {ProblemError} 409 when it has logs or laps that were not named
 */
export async function removeOuting(db: Transaction, id: string, withLogs: readonly string[]): Promise<string[]> {
  const stays = async () => {
    const others = (await logsOf(db, id)).filter(log => !withLogs.includes(log.id))
    if (others[0]) throw stillInUse({ detail: outingStays(others), see: `/logs/${others[0].id}` })
  }
  await stays()
  const going = await logsOf(db, id)
  // Locked in the order of the jobs, log before outing, or the two could wait for each other.
  await db('logs').whereIn('id', going.map(log => log.id)).orderBy('id').forUpdate().select('id')
  await db('outings').where('id', id).forUpdate().first('id')
  await stays()
  await db('logs').whereIn('id', going.map(log => log.id)).delete()
  if (await db('laps').where('outing_id', id).first('id')) throw stillInUse({ detail: outingStays([]), see: `/outings/${id}` })
  await db('outings').where('id', id).delete()
  return going.map(log => log.storageKey)
}

function stillInUse({ detail, see }: Obstacle): ProblemError {
  return new ProblemError(409, 'Still in use', detail, { see })
}
