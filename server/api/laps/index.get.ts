import { lapChoiceSchema } from '../../../shared/schemas/days'
import type { LapChoice } from '../../../shared/schemas/days'
import { idSchema, listOf, teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { countsSql } from '../../utils/laps-of-outings'

/** A lap that may be a best. */
const COUNTS = countsSql('l')

interface Row {
  id: string
  number: number
  time_s: number
  excluded: boolean
  outing_id: string
  outing_number: number
  day_id: string
  date: string
  layout_id: string
  layout_name: string
  circuit_name: string
  car_name: string
  driver_name: string
  setup_number: number
  is_best: boolean
}

export default defineApiHandler({
  about: 'The newest timed laps of a layout, at most 1000.',
  who: { action: 'read', of: 'team' },
  query: teamQuery.extend({ layoutId: idSchema }),
  answer: listOf(lapChoiceSchema),
  handler: async ({ db, teamId, query }) => {
    const rows = await db('laps as l').join('outings as o', 'o.id', 'l.outing_id').join('track_days as d', 'd.id', 'o.day_id')
      .join('layouts as y', 'y.id', 'o.layout_id').join('circuits as c', 'c.id', 'y.circuit_id').join('cars as r', 'r.id', 'o.car_id')
      .join('users as u', 'u.id', 'o.driver_id').join('setup_revisions as s', 's.id', 'o.setup_revision_id')
      .where({ 'l.team_id': teamId, 'o.layout_id': query.layoutId, 'l.kind': 'timed' })
      .orderBy([{ column: 'd.date', order: 'desc' }, { column: 'o.number', order: 'desc' }, 'l.start_s', 'l.number']).limit(1000)
      .select<Row[]>('l.id', 'l.number', 'l.time_s', 'l.excluded', 'o.id as outing_id', 'o.number as outing_number', 'd.id as day_id', 'd.date',
        'y.id as layout_id', 'y.name as layout_name', 'c.name as circuit_name', 'r.name as car_name', 'u.name as driver_name', 's.number as setup_number',
        db.raw(`(${COUNTS} and l.time_s = min(l.time_s) filter (where ${COUNTS}) over (partition by o.id)) as is_best`))
    return { items: rows.map(choiceOf) }
  },
})

function choiceOf(row: Row): LapChoice {
  return {
    id: row.id,
    number: row.number,
    timeS: row.time_s,
    excluded: row.excluded,
    outing: { id: row.outing_id, number: row.outing_number },
    day: { id: row.day_id, date: row.date },
    layout: { id: row.layout_id, name: row.layout_name, circuitName: row.circuit_name },
    carName: row.car_name,
    driverName: row.driver_name,
    setupNumber: row.setup_number,
    isOutingBest: row.is_best,
  }
}
