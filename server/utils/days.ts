import { z } from 'zod'
import { dateSchema, idSchema } from '../../shared/schemas/common'
import type { Day, DayList, DayListItem } from '../../shared/schemas/days'
import { movedToDate } from '../../shared/local-time'
import type { Transaction } from './db/transactions'
import { countsSql } from './laps-of-outings'
import { readOutingsOfDay } from './outings'
import { notFound, ProblemError } from './problems'
import { versionOf, type Versioned } from './versions'

const PAGE = 50
const cursorSchema = z.tuple([dateSchema, idSchema])

interface DayRow extends Versioned {
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
    ...versionOf(row),
    circuit: { id: row.circuit_id, name: row.circuit_name, timeZone: row.time_zone, layouts },
    outings: await readOutingsOfDay(db, id),
  }
}

/** The date of a day, and the zone of the clocks at its circuit. */
export interface DayDate { date: string, timeZone: string }

export async function readDayDate(db: Transaction, id: string): Promise<DayDate> {
  return db('track_days as d').join('circuits as c', 'c.id', 'd.circuit_id').where('d.id', id)
    .first<DayDate>('d.date', 'c.time_zone as timeZone')
}

/** Lets the starts of a day's outings go with it to another date, at the same time of day. */
export async function moveStarts(db: Transaction, dayId: string, from: DayDate, toDate: string): Promise<void> {
  if (from.date === toDate) return
  const outings = await db('outings').where('day_id', dayId).whereNotNull('started_at')
    .select<{ id: string, started_at: Date }[]>('id', 'started_at')
  for (const { id, started_at: startedAt } of outings) {
    await db('outings').where('id', id)
      .update({ started_at: movedToDate(startedAt.toISOString(), from.date, toDate, from.timeZone) })
  }
}

type DayRowOfList = Omit<DayListItem, 'bestS' | 'bestOf'> & { bests: Record<'dry' | 'wet', number | null> }

/** The best of a day: in the dry where there are dry laps; said which as soon as there are wet ones. */
function bestOf({ dry, wet }: DayRowOfList['bests']): Pick<DayListItem, 'bestS' | 'bestOf'> {
  if (wet === null) return { bestS: dry, bestOf: null }
  return dry === null ? { bestS: wet, bestOf: 'wet' } : { bestS: dry, bestOf: 'dry' }
}

/**
 * Days of a team, newest first, a page at a time.
 * @param cursor `date,id` of the last day of the page before, as it was answered there
 */
export async function listDays(
  db: Transaction,
  teamId: string,
  cursor: string | undefined,
): Promise<DayList> {
  const timed = `l.kind = 'timed' and ${countsSql('l')}`
  const rows = await db('track_days as d').join('circuits as c', 'c.id', 'd.circuit_id').where('d.team_id', teamId)
    .modify((query) => {
      if (cursor) query.whereRaw('(d.date, d.id) < (?::date, ?::uuid)', splitCursor(cursor))
    })
    .orderBy([{ column: 'd.date', order: 'desc' }, { column: 'd.id', order: 'desc' }]).limit(PAGE + 1)
    .select<DayRowOfList[]>(
      'd.id', 'd.date', 'd.name', 'c.name as circuitName',
      db.raw('(select count(*)::int from outings o where o.team_id = d.team_id and o.day_id = d.id) as "outingCount"'),
      db.raw(`(select count(*)::int from outings o join laps l on l.team_id = o.team_id and l.outing_id = o.id
        where o.team_id = d.team_id and o.day_id = d.id and ${timed}) as "timedLapCount"`),
      // Damp counts as wet: a best never mixes the two.
      db.raw(`(select json_build_object('dry', min(l.time_s) filter (where not w.wet), 'wet', min(l.time_s) filter (where w.wet))
        from outings o join laps l on l.team_id = o.team_id and l.outing_id = o.id
        cross join lateral (select coalesce(o.conditions->>'wetness' in ('damp', 'wet'), false) as wet) w
        where o.team_id = d.team_id and o.day_id = d.id and ${timed}) as bests`),
    )
  const items = rows.slice(0, PAGE).map(({ bests, ...day }) => ({ ...day, ...bestOf(bests) }))
  const last = items.at(-1)
  return { items, next: rows.length > PAGE && last ? `${last.date},${last.id}` : null }
}

function splitCursor(cursor: string): [string, string] {
  const [date, id] = cursor.split(',')
  const parsed = cursorSchema.safeParse([date, id])
  if (!parsed.success) throw new ProblemError(400, 'The address is not right', 'The cursor is not one that a list of days gave.')
  return parsed.data
}
