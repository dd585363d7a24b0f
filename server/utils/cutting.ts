import { randomUUID } from 'node:crypto'
import { LapsError } from './laps/errors'
import type { DrivingDirection, CutLap, CutResult, TimingLine } from './laps/types'
import { indexBefore } from './laps/interpolate'
import { cutLaps, type LogPath } from './laps/lap'
import { lapPath } from './laps/place'
import { makePlane, toPlane } from '../../shared/plane'
import { matchLaps } from './laps/recut'
import { readLines } from './circuits'
import { sendJob } from './jobs'
import type { Transaction } from './db/transactions'

/** What a new cut changes of a lap that was there before; the rest is a person's. */
const CUT_COLUMNS = ['outing_id', 'number', 'kind', 'start_s', 'time_s', 'first_sample', 'last_sample', 'flags']

const NOTHING: CutResult = { laps: [], lines: [], warnings: [] }

export interface LogPart {
  id: string
  team_id: string
  log_id: string
  outing_id: string
  layout_id: string
}

/**
 * Parts of a log, or of the logs of a layout, with the layout they were driven on. Their outings are locked against
 * being moved to another layout until the transaction ends.
 */
export function readParts(
  db: Transaction,
  where: { logId?: string, layoutId?: string, pending?: boolean },
): Promise<LogPart[]> {
  return db('log_parts as p').join('outings as o', 'o.id', 'p.outing_id')
    .modify((query) => {
      if (where.logId) query.where('p.log_id', where.logId)
      if (where.layoutId) query.where('o.layout_id', where.layoutId)
      if (where.pending) query.where('p.cut_pending', true)
    })
    .orderBy('p.id').forShare('o')
    .select<LogPart[]>('p.id', 'p.team_id', 'p.log_id', 'p.outing_id', 'o.layout_id')
}

/**
 * Has every log that was driven on a layout cut again by the worker; until then they count as being processed.
 * @returns how many logs that is
 */
export async function requestCut(db: Transaction, teamId: string, layoutId: string): Promise<number> {
  const parts = db('outings').where('layout_id', layoutId).select('id')
  const pending = await db('log_parts').where('team_id', teamId).whereIn('outing_id', parts)
    .whereIn('log_id', db('logs').whereIn('status', ['no_lines', 'ready']).select('id'))
    .update({ cut_pending: true }).returning<{ log_id: string }[]>('log_id')
  if (pending.length) await sendJob(db, 'layout-cut', { teamId, layoutId })
  return new Set(pending.map(part => part.log_id)).size
}

/**
 * Cuts a part of a log at the lines of its layout and stores the laps. A lap that was there before keeps its identifier
 * and its exclusion where the new one covers the same stretch of time. The layout is locked, so that lines which change
 * at the same moment are seen either wholly or not at all.
 * @returns how the log stands now
 */
export async function cutPart(db: Transaction, part: LogPart, path: LogPath): Promise<'ready' | 'no_lines'> {
  const layout = await db('layouts').where('id', part.layout_id).forUpdate()
    .first<{ direction: DrivingDirection | null, length_m: number | null }>('direction', 'length_m')
  const lines = await readLines(db, part.layout_id)
  const cut = lines.length ? cutOrSay(path, lines, layout.direction) : NOTHING
  await storeLaps(db, part, path, cut.laps)
  await db('log_parts').where('id', part.id).update({ cut_pending: false, warnings: JSON.stringify(cut.warnings) })
  if (layout.length_m === null) {
    const lengthM = bestLapLength(path, cut.laps)
    if (lengthM !== null) await db('layouts').where('id', part.layout_id).update({ length_m: lengthM })
  }
  return lines.length ? 'ready' : 'no_lines'
}

/** The cut; lines that make no laps of this log are a warning, not the end of it. */
function cutOrSay(path: LogPath, lines: TimingLine[], direction: DrivingDirection | null): CutResult {
  try {
    return cutLaps(path, lines, { direction })
  }
  catch (error) {
    if (!(error instanceof LapsError)) throw error
    return { ...NOTHING, warnings: [{ code: error.code, message: error.message }] }
  }
}

async function storeLaps(db: Transaction, part: LogPart, path: LogPath, laps: readonly CutLap[]): Promise<void> {
  const old = await db('laps').where({ team_id: part.team_id, log_part_id: part.id })
    .select<{ id: string, startS: number, timeS: number, kind: string }[]>('id', 'start_s as startS', 'time_s as timeS', 'kind')
  const ids = matchLaps(old, [...laps]).map(id => id ?? randomUUID())
  await db('laps').where({ team_id: part.team_id, log_part_id: part.id }).whereNotIn('id', ids).delete()
  if (!laps.length) return
  await db('laps').insert(laps.map((lap, i) => ({
    team_id: part.team_id,
    id: ids[i],
    outing_id: part.outing_id,
    log_part_id: part.id,
    number: lap.number,
    kind: lap.kind,
    start_s: lap.startS,
    time_s: lap.timeS,
    first_sample: Math.max(0, indexBefore(path.timeS, lap.startS)),
    last_sample: Math.min(path.timeS.length - 1, indexBefore(path.timeS, lap.startS + lap.timeS) + 1),
    flags: JSON.stringify(lap.flags),
  }))).onConflict(['team_id', 'id']).merge(CUT_COLUMNS)
  await db('lap_sectors').where('team_id', part.team_id).whereIn('lap_id', ids).delete()
  const sectors = laps.flatMap((lap, i) => lap.sectorsS.map((time, j) =>
    ({ team_id: part.team_id, lap_id: ids[i], ordinal: j + 1, time_s: time })))
  if (sectors.length) await db('lap_sectors').insert(sectors)
}

/** Distance driven in the fastest lap without a flag, metres. */
function bestLapLength(path: LogPath, laps: readonly CutLap[]): number | null {
  const timed = laps.filter(lap => lap.kind === 'timed' && !lap.flags.length)
  if (!timed.length) return null
  const best = timed.reduce((a, b) => b.timeS < a.timeS ? b : a)
  try {
    return lapLength(path, best)
  }
  catch (error) {
    if (error instanceof LapsError) return null
    throw error
  }
}

function lapLength(path: LogPath, best: CutLap): number {
  const plane = makePlane(path.latitudeDeg[0]!, path.longitudeDeg[0]!)
  const { xM, yM } = toPlane(plane, path.latitudeDeg, path.longitudeDeg)
  return lapPath(path.timeS, xM, yM, best.startS, best.timeS).stationM.at(-1)!
}
