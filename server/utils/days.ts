import { z } from 'zod'
import { dateSchema, idSchema } from '../../shared/schemas/common'
import type { Day, DayListItem } from '../../shared/schemas/days'
import type { Transaction } from './db/transactions'
import { readOutingsOfDay } from './outings'
import { notFound, ProblemError } from './problems'

const PAGE = 50
const cursorSchema = z.tuple([dateSchema, idSchema])

interface DayRow {
  id: string
  team_id: string
  date: string
  name: string
  notes: string
  circuit_id: string
  circuit_name: string
  time_zone: string
}

export async function readDay(db: Transaction, id: string): Promise<Day> {
  const row = await db('track_days as d').join('circuits as c', 'c.id', 'd.circuit_id').where('d.id', id)
    .first<DayRow | undefined>('d.*', 'c.name as circuit_name', 'c.time_zone')
  if (!row) throw notFound('day')
  const layouts = await db('layouts').where('circuit_id', row.circuit_id).orderBy('name')
    .select<{ id: string, name: string }[]>('id', 'name')
  return {
    id: row.id,
    teamId: row.team_id,
    date: row.date,
    name: row.name,
    notes: row.notes,
    circuit: { id: row.circuit_id, name: row.circuit_name, timeZone: row.time_zone, layouts },
    outings: await readOutingsOfDay(db, id),
  }
}

/**
 * Days of a team, newest first, a page at a time.
 * @param cursor `date,id` of the last day of the page before, as it was answered there
 */
export async function listDays(
  db: Transaction,
  teamId: string,
  cursor: string | undefined,
): Promise<{ items: DayListItem[], next: string | null }> {
  const timed = 'l.kind = \'timed\' and not l.excluded and not l.flags @> \'["gap_at_line"]\''
  const rows = await db('track_days as d').join('circuits as c', 'c.id', 'd.circuit_id').where('d.team_id', teamId)
    .modify((query) => {
      if (cursor) query.whereRaw('(d.date, d.id) < (?::date, ?::uuid)', splitCursor(cursor))
    })
    .orderBy([{ column: 'd.date', order: 'desc' }, { column: 'd.id', order: 'desc' }]).limit(PAGE + 1)
    .select<DayListItem[]>(
      'd.id', 'd.date', 'd.name', 'c.name as circuitName',
      db.raw('(select count(*)::int from outings o where o.team_id = d.team_id and o.day_id = d.id) as "outingCount"'),
      db.raw(`(select count(*)::int from outings o join laps l on l.team_id = o.team_id and l.outing_id = o.id
        where o.team_id = d.team_id and o.day_id = d.id and ${timed}) as "timedLapCount"`),
      db.raw(`(select min(l.time_s) from outings o join laps l on l.team_id = o.team_id and l.outing_id = o.id
        where o.team_id = d.team_id and o.day_id = d.id and ${timed}) as "bestS"`),
    )
  const items = rows.slice(0, PAGE)
  const last = items.at(-1)
  return { items, next: rows.length > PAGE && last ? `${last.date},${last.id}` : null }
}

function splitCursor(cursor: string): [string, string] {
  const [date, id] = cursor.split(',')
  const parsed = cursorSchema.safeParse([date, id])
  if (!parsed.success) throw new ProblemError(400, 'The address is not right', 'The cursor is not one that a list of days gave.')
  return parsed.data
}
