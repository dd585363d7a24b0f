import type { LogSummary, Outing, OutingBody, OutingSummary } from '../../shared/schemas/days'
import { conditionsSchema, hotPressuresSchema } from '../../shared/schemas/days'
import type { LogProblem } from '../../shared/schemas/logs'
import type { Sheet } from '../../shared/schemas/setups'
import { sheetDifferences } from '../../shared/setup-fields'
import type { Transaction } from './db/transactions'
import { readLaps } from './laps-of-outings'
import { countRows, shownStatus } from './logs'
import { notFound } from './problems'
import { versionOf, type Versioned } from './versions'

interface OutingRow extends Versioned {
  id: string
  team_id: string
  day_id: string
  number: number
  started_at: Date | null
  layout_id: string
  layout_name: string
  line_count: number
  car_id: string
  car_name: string
  setup_id: string
  setup_number: number
  setup_name: string
  sheet: Sheet
  driver_id: string
  driver_name: string
  fuel_start_l: number | null
  passenger: boolean
  conditions: OutingSummary['conditions']
  hot_pressures: OutingSummary['hotPressures']
  notes: string
}

interface LogRow extends Pick<LogSummary, 'id' | 'status' | 'problem'> {
  outing_id: string
  file_name: string
  size_bytes: number
  problems: LogProblem[]
}

function outingRows(db: Transaction) {
  return db('outings as o')
    .join('layouts as y', 'y.id', 'o.layout_id')
    .join('cars as c', 'c.id', 'o.car_id')
    .join('setup_revisions as r', 'r.id', 'o.setup_revision_id')
    .join('users as u', 'u.id', 'o.driver_id')
    .select<OutingRow[]>(
      'o.*', 'y.name as layout_name', 'c.name as car_name', 'r.id as setup_id', 'r.number as setup_number', 'r.name as setup_name',
      'r.sheet', 'u.name as driver_name',
      db.raw('(select count(*)::int from timing_lines t where t.team_id = o.team_id and t.layout_id = o.layout_id) as line_count'),
    )
}

async function readLogs(db: Transaction, outingIds: readonly string[]): Promise<LogRow[]> {
  return db('logs as g').join('log_parts as p', 'p.log_id', 'g.id').whereIn('p.outing_id', outingIds)
    .orderBy('g.uploaded_at').select<LogRow[]>('p.outing_id', 'g.id', 'g.file_name', 'g.size_bytes', 'g.problem', 'g.problems', shownStatus(db, 'g'))
}

/** Outings of a day in order, with laps, logs, and what was changed on the car since its outing before. */
export async function readOutingsOfDay(db: Transaction, dayId: string): Promise<OutingSummary[]> {
  const rows = await outingRows(db).where('o.day_id', dayId).orderBy('o.number')
  const ids = rows.map(row => row.id)
  const [laps, logs] = [await readLaps(db, ids), await readLogs(db, ids)]
  return rows.map((row, i) => {
    const before = rows.slice(0, i).findLast(other => other.car_id === row.car_id)
    const setupChanges = before
      ? sheetDifferences(before.sheet, row.sheet).map(({ label, unit, a, b }) => ({ label, unit, from: a, to: b }))
      : []
    return { ...summaryOf(row, laps.get(row.id) ?? [], logs), setupChanges }
  })
}

export async function readOuting(db: Transaction, id: string): Promise<Outing> {
  const row = await outingRows(db).where('o.id', id).first() as OutingRow | undefined
  if (!row) throw notFound('outing')
  const day = await db('track_days as d').join('circuits as c', 'c.id', 'd.circuit_id').where('d.id', row.day_id)
    .first<Outing['day']>('d.id', 'd.date', 'd.name', 'c.id as circuitId', 'c.name as circuitName', 'c.time_zone as timeZone')
  const laps = await readLaps(db, [id])
  return { ...summaryOf(row, laps.get(id) ?? [], await readLogs(db, [id])), teamId: row.team_id, day }
}

function summaryOf(row: OutingRow, laps: OutingSummary['laps'], logs: LogRow[]): Omit<OutingSummary, 'setupChanges'> {
  return {
    id: row.id,
    number: row.number,
    startedAt: row.started_at?.toISOString() ?? null,
    layout: { id: row.layout_id, name: row.layout_name, lineCount: row.line_count },
    car: { id: row.car_id, name: row.car_name },
    setup: { id: row.setup_id, number: row.setup_number, name: row.setup_name },
    driver: { id: row.driver_id, name: row.driver_name },
    fuelStartL: row.fuel_start_l,
    passenger: row.passenger,
    conditions: conditionsSchema.parse(row.conditions),
    hotPressures: hotPressuresSchema.parse(row.hot_pressures),
    notes: row.notes,
    ...versionOf(row),
    laps,
    logs: logs.filter(log => log.outing_id === row.id).map(summaryOfLog),
  }
}

/** The columns of an outing as a form gives them. */
export function outingColumns(body: OutingBody) {
  return {
    layout_id: body.layoutId,
    car_id: body.carId,
    setup_revision_id: body.setupId,
    driver_id: body.driverId,
    started_at: body.startedAt,
    fuel_start_l: body.fuelStartL,
    passenger: body.passenger,
    conditions: JSON.stringify(body.conditions),
    hot_pressures: JSON.stringify(body.hotPressures),
    notes: body.notes,
  }
}

function summaryOfLog({ id, status, problem, ...row }: LogRow): LogSummary {
  const rowProblems = countRows(row.problems)
  return { id, fileName: row.file_name, sizeBytes: row.size_bytes, status, problem, rowProblems }
}
