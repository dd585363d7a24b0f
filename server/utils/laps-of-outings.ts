import type { Lap } from '../../shared/schemas/days'
import type { Transaction } from './db/transactions'

interface LapRow {
  id: string
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

/** Laps with their sector times of these outings, in driving order, by outing. */
export async function readLaps(db: Transaction, outingIds: readonly string[]): Promise<Map<string, Lap[]>> {
  const rows = await db('laps as l').whereIn('l.outing_id', outingIds).orderBy(['l.outing_id', 'l.start_s', 'l.number'])
    .select<LapRow[]>('l.*', db.raw(`(select array_agg(s.time_s order by s.ordinal) from lap_sectors s
      where s.team_id = l.team_id and s.lap_id = l.id) as sectors`))
  const laps = new Map<string, Lap[]>(outingIds.map(id => [id, []]))
  for (const row of rows) laps.get(row.outing_id)!.push(lapOf(row))
  return laps
}

function lapOf(row: LapRow): Lap {
  return {
    id: row.id,
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
