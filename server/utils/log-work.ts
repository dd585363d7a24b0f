import type { LogProblem, LogPreview, LogStatus, ColumnMap, LogStep } from '../../shared/schemas/logs'
import { cleanLog } from './laps/clean'
import { LapsError } from './laps/errors'
import { createLogReader } from './laps/read'
import type { CleanLog, ReadLog } from './laps/types'
import { readChannels, writeChannels } from './channels'
import { cutPart, readParts, type LogPath } from './cutting'
import { asTeam, type Transaction } from './db/transactions'
import type { Jobs } from './jobs'
import { readLogFile } from './log-files'
import { tellProgress } from './progress'

/** Where each step of reading a log begins, as a share of the whole; reading the bytes takes most of it. */
const STEP_STARTS: Record<LogStep, number> = { read: 0, clean: 0.6, project: 0.7, cross: 0.72, lap: 0.75, store: 0.8 }
const PROGRESS_EVERY_MS = 250

interface LogRow {
  id: string
  storage_key: string
  size_bytes: number
  status: LogStatus
  preview: LogPreview
  column_map: ColumnMap
}

/** Reads a log from its file and cuts it into laps; the same file gives the same laps however often it runs. */
export async function readLogJob({ teamId, logId }: Jobs['log-read'], lastTry: boolean): Promise<void> {
  const log = await asTeam(teamId, async (db) => {
    const [row] = await db('logs').where('id', logId).whereIn('status', ['queued', 'processing'])
      .update({ status: 'processing' }).returning<LogRow[]>('*')
    return row
  })
  if (!log) return // removed or cancelled in the meantime
  try {
    const clean = await readAndClean(teamId, log)
    if (!clean) return
    await tell(log.id, 'project', 1)
    const status = await asTeam(teamId, db => store(db, log, clean))
    if (status) await tellProgress({ logId: log.id, status, step: null, fraction: 1 })
  }
  catch (error) {
    await refuse(teamId, log.id, error, lastTry)
  }
}

async function readAndClean(teamId: string, log: LogRow): Promise<CleanLog | null> {
  const reader = createLogReader(log.preview, log.column_map)
  let bytes = 0
  let told = 0
  for await (const chunk of readLogFile(log.storage_key)) {
    reader.push(chunk as Buffer)
    bytes += (chunk as Buffer).length
    if (Date.now() - told > PROGRESS_EVERY_MS) {
      told = Date.now()
      if (!await stillWanted(teamId, log.id)) return null
      await tell(log.id, 'read', bytes / Math.max(1, log.size_bytes))
    }
  }
  const read: ReadLog = reader.end()
  await tell(log.id, 'clean', 0)
  const clean = cleanLog(read)
  return await stillWanted(teamId, log.id) ? { ...clean, problems: [...read.problems, ...clean.problems] } : null
}

function stillWanted(teamId: string, logId: string): Promise<boolean> {
  return asTeam(teamId, async db => Boolean(await db('logs').where({ id: logId, status: 'processing' }).first('id')))
}

/** One transaction writes channels, laps and status: until it commits the log has no laps. */
async function store(db: Transaction, log: LogRow, clean: CleanLog): Promise<LogStatus | null> {
  const held = await db('logs').where({ id: log.id, status: 'processing' }).forUpdate().first<{ team_id: string } | undefined>('team_id')
  if (!held) return null
  await tell(log.id, 'store', 0)
  await writeChannels(db, held.team_id, log.id, clean.channels)
  const path = pathOf(clean)
  let status: LogStatus = 'ready'
  for (const part of await readParts(db, { logId: log.id })) status = await cutPart(db, part, path)
  await db('logs').where('id', log.id).update({
    status,
    problem: null,
    sample_count: path.timeS.length,
    rate_hz: clean.rateHz,
    duration_s: path.timeS.at(-1)! - path.timeS[0]!,
    started_at: clean.startedAtS === null ? null : new Date(clean.startedAtS * 1000),
    row_count: clean.rows,
    problems: JSON.stringify(clean.problems satisfies LogProblem[]),
    gaps: JSON.stringify(clean.gaps),
  })
  return status
}

function pathOf(clean: CleanLog): LogPath {
  const samples = (name: string) => clean.channels.find(channel => channel.name === name)!.samples as Float64Array
  return { timeS: samples('time'), latitudeDeg: samples('latitude'), longitudeDeg: samples('longitude'), gaps: clean.gaps }
}

/** A log that cannot be used says why; a fault of ours is tried again, and told at the last try. */
async function refuse(teamId: string, logId: string, error: unknown, lastTry: boolean): Promise<void> {
  const known = error instanceof LapsError
  if (!known && !lastTry) {
    await asTeam(teamId, db => db('logs').where({ id: logId, status: 'processing' }).update({ status: 'queued' }))
    throw error
  }
  const problem = known
    ? { code: error.code, message: error.message, row: error.row }
    : { code: 'internal', message: 'The log could not be read through a fault of ours, not of the file. It is kept; try again with “Read again”.' }
  await asTeam(teamId, db => db('logs').where({ id: logId, status: 'processing' }).update({ status: 'refused', problem: JSON.stringify(problem) }))
  await tellProgress({ logId, status: 'refused', step: null, fraction: 1 })
  if (!known) throw error
}

/** Lines have changed: every log driven on the layout is cut again from its stored channels. */
export async function cutLayoutJob({ teamId, layoutId }: Jobs['layout-cut'], lastTry: boolean): Promise<void> {
  try {
    await cutLayout(teamId, layoutId)
  }
  catch (error) {
    // Given up: the laps stay as they were, and nobody waits for others any more.
    if (lastTry) await asTeam(teamId, db => stopWaiting(db, layoutId))
    throw error
  }
}

async function stopWaiting(db: Transaction, layoutId: string): Promise<void> {
  const ids = (await readParts(db, { layoutId })).map(part => part.id)
  await db('log_parts').whereIn('id', ids).update({ cut_pending: false })
}

async function cutLayout(teamId: string, layoutId: string): Promise<void> {
  const parts = await asTeam(teamId, db => readParts(db, { layoutId }))
  for (const { id, log_id: logId } of parts) {
    const status = await asTeam(teamId, async (db) => {
      const log = await db('logs').where('id', logId).whereIn('status', ['no_lines', 'ready']).forUpdate()
        .first<{ gaps: LogPath['gaps'] } | undefined>('gaps')
      const part = (await readParts(db, { logId })).find(item => item.id === id)
      if (!log || !part) return null
      const found = await cutPart(db, part, await readPath(db, teamId, logId, log.gaps))
      await db('logs').where('id', logId).update({ status: found })
      return found
    })
    if (status) await tellProgress({ logId, status, step: null, fraction: 1 })
  }
}

/** The path of a log from its stored channels. */
export async function readPath(db: Transaction, teamId: string, logId: string, gaps: LogPath['gaps']): Promise<LogPath> {
  const channels = await readChannels(db, teamId, logId, ['time', 'latitude', 'longitude'])
  const samples = (name: string) => channels.get(name)!.samples as Float64Array
  return { timeS: samples('time'), latitudeDeg: samples('latitude'), longitudeDeg: samples('longitude'), gaps }
}

async function tell(logId: string, step: LogStep, share: number): Promise<void> {
  const starts = Object.values(STEP_STARTS)
  const from = STEP_STARTS[step]
  const to = starts.find(start => start > from) ?? 1
  await tellProgress({ logId, status: 'processing', step, fraction: Math.min(1, from + share * (to - from)) })
}
