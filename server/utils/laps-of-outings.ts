import type { Lap } from '../../shared/schemas/days'
import type { Transaction } from './db/transactions'

interface LapRow {
  id: string
  log_id: string | null
  outing_id: string
  number: number
  kind: Lap['kind']
  start_s: number
  time_s: number
  flags: string[]
  excluded: boolean
  excluded_reason: string
  sectors: (number | null)[] | null
}

/** SQL that is true of a lap which nobody left out, whose lines did not lie in a gap, and which no earlier log has. */
export function countsSql(table: string): string {
  return `not ${table}.excluded and not ${table}.flags @> '["gap_at_line"]' and not ${table}.flags @> '["repeated"]'`
}

/** Laps with their sector times of these outings, in driving order, by outing. */
export async function readLaps(db: Transaction, outingIds: readonly string[]): Promise<Map<string, Lap[]>> {
  const rows = await db('laps as l')
    .leftJoin('log_parts as p', join => join.on('p.team_id', 'l.team_id').andOn('p.id', 'l.log_part_id')).whereIn('l.outing_id', outingIds).orderBy(['l.outing_id', 'l.start_s', 'l.number', 'p.id'])
    .select<LapRow[]>('l.*', 'p.log_id', db.raw(`(select array_agg(s.time_s order by s.ordinal) from lap_sectors s
      where s.team_id = l.team_id and s.lap_id = l.id) as sectors`))
  const laps = new Map<string, Lap[]>(outingIds.map(id => [id, []]))
  for (const row of rows) laps.get(row.outing_id)!.push(lapOf(row))
  return laps
}

function lapOf(row: LapRow): Lap {
  return {
    id: row.id,
    logId: row.log_id,
    number: row.number,
    kind: row.kind,
    startS: row.start_s,
    timeS: row.time_s,
    sectorsS: row.sectors ?? [],
    flags: row.flags,
    excluded: row.excluded,
    excludedReason: row.excluded_reason,
  }
}
