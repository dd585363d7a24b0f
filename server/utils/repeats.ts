import { actAsTeam, lockNumbers, type Transaction } from './db/transactions'
import { repeatedLaps, type LoggedLaps } from './laps/repeats'

const FLAG = 'repeated'

interface Row {
  id: string
  kind: string
  start_s: number
  time_s: number
  flags: string[]
  log_id: string
  log_started_at: Date | null
}

/**
 * Flags those laps of an outing that a log added earlier has already. To be called at the end of whatever changes the
 * laps of one of its logs: what counts of the others can change with them.
 */
export async function markRepeats(db: Transaction, teamId: string, outingId: string): Promise<void> {
  await lockNumbers(db, outingId)
  // Laps are written in the name of the team: whoever may remove a log need not be one who may leave out laps.
  await actAsTeam(db, teamId)
  const rows = await db('laps as l').join('log_parts as p', 'p.id', 'l.log_part_id').join('logs as g', 'g.id', 'p.log_id')
    .where({ 'l.team_id': teamId, 'l.outing_id': outingId }).orderBy(['g.uploaded_at', 'g.id', 'l.start_s'])
    .select<Row[]>('l.id', 'l.kind', 'l.start_s', 'l.time_s', 'l.flags', 'g.id as log_id', 'g.started_at as log_started_at')
  const repeated = repeatedLaps(byLog(rows))
  for (const { id, flags } of rows.filter(row => row.flags.includes(FLAG) !== repeated.has(row.id))) {
    const next = repeated.has(id) ? [...flags, FLAG] : flags.filter(flag => flag !== FLAG)
    await db('laps').where({ team_id: teamId, id }).update({ flags: JSON.stringify(next) })
  }
}

function byLog(rows: readonly Row[]): LoggedLaps[] {
  const logs = new Map<string, LoggedLaps & { laps: LoggedLaps['laps'][number][] }>()
  for (const row of rows.filter(each => each.kind === 'timed')) {
    // The instant of the first row, from which a dated clock counts.
    const zeroAtS = row.log_started_at === null ? null : row.log_started_at.getTime() / 1000
    const log = logs.get(row.log_id) ?? { zeroAtS, laps: [] }
    logs.set(row.log_id, log)
    log.laps.push({ id: row.id, startS: row.start_s, timeS: row.time_s, sure: !row.flags.includes('gap_at_line') })
  }
  return [...logs.values()]
}
