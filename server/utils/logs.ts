import type { Log, LogProgress } from '../../shared/schemas/days'
import type { ColumnMap, LogPreview, LogProblem, LogStatus } from '../../shared/schemas/logs'
import type { Raw, Transaction } from './db/transactions'
import { notFound } from './problems'

interface LogRow {
  id: string
  team_id: string
  file_name: string
  sha256: string | null
  size_bytes: number
  preview: LogPreview | null
  column_map: ColumnMap | null
  remembered: boolean
  status: LogStatus
  problem: Log['problem']
  row_count: number | null
  sample_count: number | null
  rate_hz: number | null
  duration_s: number | null
  problems: LogProblem[]
  uploaded_at: Date
}

/** The status of a log as people see it: while its laps wait to be cut again, it is being processed. */
export function shownStatus(db: Transaction, table: string): Raw {
  return db.raw(`case when ??.status in ('no_lines', 'ready') and exists (select 1 from log_parts w
    where w.team_id = ??.team_id and w.log_id = ??.id and w.cut_pending) then 'processing' else ??.status end as status`,
  [table, table, table, table])
}

/** How many rows some problems concern; those that concern no single row are not of the rows. */
export function countRows(problems: readonly LogProblem[]): number {
  return problems.reduce((sum, { row, count }) => sum + (row === undefined ? 0 : count ?? 1), 0)
}

/** A log with its columns, channels, problems and the outing it was driven in. */
export async function readLog(db: Transaction, id: string): Promise<Log> {
  const row = await db('logs').where('id', id).first<LogRow | undefined>('*', shownStatus(db, 'logs'))
  if (!row) throw notFound('log')
  const channels = await db('channels').where({ team_id: row.team_id, log_id: id }).orderBy('ordinal')
    .select<Log['channels']>('name', 'label', 'unit', 'rate_hz as rateHz')
  const part = await db('log_parts as p')
    .join('outings as o', 'o.id', 'p.outing_id').join('track_days as d', 'd.id', 'o.day_id').join('circuits as c', 'c.id', 'd.circuit_id')
    .join('layouts as y', 'y.id', 'o.layout_id').join('cars as r', 'r.id', 'o.car_id').join('users as u', 'u.id', 'o.driver_id')
    .where('p.log_id', id).first<(NonNullable<Log['outing']> & { warnings: LogProblem[] }) | undefined>(
      'o.id', 'o.number', 'd.id as dayId', 'd.date', 'c.name as circuitName', 'y.id as layoutId', 'y.name as layoutName',
      'r.name as carName', 'u.name as driverName', 'p.warnings',
      db.raw('(select count(*)::int from timing_lines t where t.team_id = y.team_id and t.layout_id = y.id) as "lineCount"'),
    )
  const { warnings = [], ...outing } = part ?? {}
  return {
    id: row.id,
    teamId: row.team_id,
    fileName: row.file_name,
    sha256: row.sha256,
    sizeBytes: row.size_bytes,
    status: row.status,
    problem: row.problem,
    rowProblems: countRows(row.problems),
    uploadedAt: row.uploaded_at.toISOString(),
    rows: row.row_count,
    samples: row.sample_count,
    rateHz: row.rate_hz,
    durationS: row.duration_s,
    preview: row.preview,
    columnMap: row.column_map,
    remembered: row.remembered,
    problems: row.problems,
    channels,
    outing: part ? outing as NonNullable<Log['outing']> : null,
    warnings,
  }
}

/** How far a log is, as the database knows it: what a page is told before the first live step arrives. */
export async function readProgress(db: Transaction, id: string): Promise<LogProgress> {
  const row = await db('logs').where('id', id)
    .first<{ status: LogStatus, restarted: boolean } | undefined>(shownStatus(db, 'logs'), 'restarted')
  if (!row) throw notFound('log')
  const over = !['uploading', 'queued', 'processing'].includes(row.status)
  return { logId: id, status: row.status, step: null, fraction: over ? 1 : 0, restarted: row.restarted }
}
