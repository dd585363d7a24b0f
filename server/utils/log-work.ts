import type { LogProblem, LogPreview, LogStatus, ColumnMap, LogStep } from '../../shared/schemas/logs'
import { cleanLog } from './laps/clean'
import { LapsError } from './laps/errors'
import type { LogPath } from './laps/lap'
import { createLogReader } from './laps/read'
import type { CleanLog, ReadLog } from './laps/types'
import { writeChannels } from './channels'
import { cutPart, readParts } from './cutting'
import { asTeam, type Transaction } from './db/transactions'
import { isOurs, mustBeOurs, type Run } from './job-runs'
import type { Jobs } from './jobs'
import { readLogFile } from './log-files'
import { tellProgress } from './progress'
import { markRepeats } from './repeats'

/** Where each step of reading a log begins, as a share of the whole; reading the bytes takes most of it. */
const STEP_STARTS: Record<LogStep, number> = { read: 0, clean: 0.6, cut: 0.75, store: 0.85 }
const PROGRESS_EVERY_MS = 250

interface LogRow {
  id: string
  storage_key: string
  size_bytes: number
  status: LogStatus
  header_key: string | null
  preview: LogPreview
  column_map: ColumnMap
  restarted: boolean
}

/** Reads a log from its file and cuts it into laps; the same file gives the same laps however often it runs. */
export async function readLogJob({ teamId, logId }: Jobs['log-read'], run: Run): Promise<void> {
  const log = await asTeam(teamId, async (db) => {
    const [row] = await db('logs').where('id', logId).whereIn('status', ['queued', 'processing'])
      .update({ status: 'processing' }).returning<LogRow[]>('*')
    return row
  })
  if (!log) return // removed or cancelled in the meantime
  try {
    const clean = await readAndClean(teamId, log, run)
    if (!clean) return
    const status = await asTeam(teamId, db => store(db, log, clean, run))
    if (status) await tellProgress({ logId: log.id, status, step: null, fraction: 1 })
  }
  catch (error) {
    // A fault of ours is tried again; a log that cannot be used stays so however often it is read.
    if (!(error instanceof LapsError)) throw error
    await refuse(teamId, log.id, { code: error.code, message: error.message, row: error.row }, run)
  }
}

async function readAndClean(teamId: string, log: LogRow, run: Run): Promise<CleanLog | null> {
  const reader = createLogReader(log.preview, log.column_map)
  let bytes = 0
  let told = 0
  for await (const chunk of readLogFile(log.storage_key)) {
    reader.push(chunk as Buffer)
    bytes += (chunk as Buffer).length
    if (Date.now() - told > PROGRESS_EVERY_MS) {
      told = Date.now()
      if (!await stillWanted(teamId, log.id, run)) return null
      await tell(log, 'read', bytes / Math.max(1, log.size_bytes))
    }
  }
  const read: ReadLog = reader.end()
  await tell(log, 'clean', 0)
  const clean = cleanLog(read)
  return await stillWanted(teamId, log.id, run) ? { ...clean, problems: [...read.problems, ...clean.problems] } : null
}

function stillWanted(teamId: string, logId: string, run: Run): Promise<boolean> {
  return asTeam(teamId, async db => await isOurs(db, run)
    && Boolean(await db('logs').where({ id: logId, status: 'processing' }).first('id')))
}

/** The reading broke off and begins again: the log waits, and its pages say why. */
export async function waitAgain(db: Transaction, { logId }: Jobs['log-read']): Promise<(() => Promise<void>) | undefined> {
  const waits = await db('logs').where({ id: logId, status: 'processing' }).update({ status: 'queued', restarted: true })
  return waits ? () => tellProgress({ logId, status: 'queued', step: null, fraction: 0, restarted: true }) : undefined
}

/**
 * One transaction cuts the laps and writes them with the channels: until it commits the log has no laps. Its columns
 * are remembered now, when they are known to work.
 */
async function store(db: Transaction, log: LogRow, clean: CleanLog, run: Run): Promise<LogStatus | null> {
  const held = await db('logs').where({ id: log.id, status: 'processing' }).forUpdate()
    .first<{ team_id: string } | undefined>('team_id')
  if (!held) return null
  await tell(log, 'cut', 0)
  const path = pathOf(clean)
  let status: LogStatus = 'ready'
  const parts = await readParts(db, { logId: log.id })
  for (const part of parts) status = await cutPart(db, part, path)
  await tell(log, 'store', 0)
  await writeChannels(db, held.team_id, log.id, clean.channels)
  await db('logs').where('id', log.id).update({
    status,
    problem: null,
    restarted: false,
    sample_count: path.timeS.length,
    rate_hz: clean.rateHz,
    duration_s: path.timeS.at(-1)! - path.timeS[0]!,
    started_at: clean.startedAtS === null ? null : new Date(clean.startedAtS * 1000),
    row_count: clean.rows,
    problems: JSON.stringify(clean.problems satisfies LogProblem[]),
    gaps: JSON.stringify(clean.gaps),
  })
  if (log.header_key !== null) {
    const known = { column_map: JSON.stringify(log.column_map), updated_at: db.fn.now() }
    await db('column_maps').insert({ team_id: held.team_id, header_key: log.header_key, ...known })
      .onConflict(['team_id', 'header_key']).merge(known)
  }
  for (const part of parts) await markRepeats(db, part.team_id, part.outing_id)
  await mustBeOurs(db, run)
  return status
}

function pathOf(clean: CleanLog): LogPath {
  const samples = (name: string) => clean.channels.find(channel => channel.name === name)!.samples as Float64Array
  return {
    timeS: samples('time'),
    latitudeDeg: samples('latitude'),
    longitudeDeg: samples('longitude'),
    gaps: clean.gaps,
  }
}

/** The log says why it cannot be used; laps and channels of an earlier reading go, not being of these columns. */
async function refuse(teamId: string, logId: string, problem: LogProblem, run?: Run): Promise<void> {
  await asTeam(teamId, async (db) => {
    const changed = await db('logs').where('id', logId).whereIn('status', ['queued', 'processing'])
      .update({ status: 'refused', restarted: false, problem: JSON.stringify(problem), problems: '[]', gaps: '[]' })
    if (!changed) return
    const parts = await db('log_parts').where('log_id', logId).update({ warnings: '[]', cut_pending: false })
      .returning<{ id: string, outing_id: string }[]>(['id', 'outing_id'])
    await db('laps').where('team_id', teamId).whereIn('log_part_id', parts.map(part => part.id)).delete()
    await db('channels').where({ team_id: teamId, log_id: logId }).delete()
    for (const part of parts) await markRepeats(db, teamId, part.outing_id)
    if (run) await mustBeOurs(db, run)
  })
  await tellProgress({ logId, status: 'refused', step: null, fraction: 1 })
}

/** The job has failed, or its worker was killed, as often as it may. */
export function giveUpLog({ teamId, logId }: Jobs['log-read-failed']): Promise<void> {
  const message = 'The log could not be read through a fault of ours, not of the file. It is kept: try “Read again”.'
  return refuse(teamId, logId, { code: 'internal', message })
}

async function tell({ id: logId, restarted }: LogRow, step: LogStep, share: number): Promise<void> {
  const starts = Object.values(STEP_STARTS)
  const from = STEP_STARTS[step]
  const to = starts.find(start => start > from) ?? 1
  await tellProgress({ logId, status: 'processing', step, fraction: Math.min(1, from + share * (to - from)), restarted })
}
