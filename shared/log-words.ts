import type { Lap, LogProgress, LogSummary } from './schemas/days'
import { LOG_STEPS, type LogStatus, type LogStep } from './schemas/logs'

/** What a log is doing, for lists. */
export const STATUS_WORDS: Record<LogStatus, string> = {
  uploading: 'arriving',
  mapping: 'columns to be confirmed',
  queued: 'waiting to be read',
  processing: 'being read',
  no_lines: 'read; no timing line yet',
  ready: 'read',
  refused: 'refused',
}

/** The steps of reading a log, as a person sees them. */
export const STEP_WORDS: Record<LogStep, string> = {
  read: 'Reading the rows',
  clean: 'Checking times, positions and gaps',
  cut: 'Cutting it into laps',
  store: 'Storing laps and channels',
}

export type StepState = 'done' | 'now' | 'waiting'

/** Whether a log is on its way and will change by itself. */
export function isUnderWay(status: LogStatus): boolean {
  return status === 'uploading' || status === 'queued' || status === 'processing'
}

/** Each step with its state, from what the worker reported last. An unknown step leaves all of them waiting. */
export function stepStates(progress: Pick<LogProgress, 'status' | 'step'>): { step: LogStep, words: string, state: StepState }[] {
  const now = progress.status === 'processing' ? LOG_STEPS.findIndex(step => step === progress.step) : -1
  const finished = progress.status === 'ready' || progress.status === 'no_lines'
  return LOG_STEPS.map((step, i) => ({
    step,
    words: STEP_WORDS[step],
    state: finished || i < now ? 'done' : i === now ? 'now' : 'waiting',
  }))
}

/** What is known of a log after some news: news that do not name the step leave the one that was told before. */
export function withNews(before: LogProgress | undefined, news: LogProgress): LogProgress {
  if (before?.status !== 'processing' || news.status !== 'processing' || news.step !== null) return news
  return { ...news, step: before.step, fraction: Math.max(before.fraction, news.fraction) }
}

/** One line about a log on its way: the step in words and how far the whole is. */
export function progressWords(progress: Pick<LogProgress, 'status' | 'step' | 'fraction' | 'restarted'>): string {
  if (progress.status === 'queued' && progress.restarted) return 'The worker was lost; the reading begins again by itself'
  if (progress.status !== 'processing') return STATUS_WORDS[progress.status]
  const step = LOG_STEPS.find(known => known === progress.step)
  return `${step ? STEP_WORDS[step] : 'Being read'}, ${Math.round(progress.fraction * 100)} %`
}

/** That rows of a log had to be left out or mended, for lists; empty where none had. */
export function rowProblemWords({ rowProblems: count }: Pick<LogSummary, 'rowProblems'>, written: string): string {
  if (count === 0) return ''
  return count === 1 ? 'Something was wrong in 1 row.' : `Something was wrong in ${written} rows.`
}

/** Why laps of some logs of an outing do not count; empty where each lap is in one log alone. */
export function overlapWords(laps: readonly Lap[], logs: readonly Pick<LogSummary, 'id' | 'fileName'>[]): string {
  const repeated = laps.filter(lap => lap.flags.includes('repeated'))
  const files = logs.filter(log => repeated.some(lap => lap.logId === log.id)).map(log => log.fileName)
  if (files.length === 0) return ''
  const those = repeated.length === 1 ? '1 lap' : `${repeated.length} laps`
  return `${those} of ${files.join(' and ')} ${repeated.length === 1 ? 'does' : 'do'} not count: a log of this outing that was `
    + 'added earlier has the same minutes, or one of the two does not tell the time of day. '
    + 'If it was another drive, give it an outing of its own.'
}

/** Rows a problem concerns, as it is written above it; empty where no row is to blame. */
export function rowWords(problem: { row?: number | undefined, count?: number | undefined }): string {
  if (problem.row === undefined) return ''
  const count = problem.count ?? 1
  return count > 1 ? `row ${problem.row} and ${count - 1} more` : `row ${problem.row}`
}

/** A problem in one line; its row is added unless the words name it already. */
export function problemWords(problem: { message: string, row?: number | undefined }): string {
  const { message, row } = problem
  return row === undefined || new RegExp(`\\b${row}\\b`).test(message) ? message : `${message} (row ${row})`
}
