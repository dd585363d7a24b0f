import type { Sentence } from './day-sheet'
import type { ColumnCounts } from './log-columns'
import type { Log } from './schemas/days'
import { asSentence, countInWords } from './utils/format'

/** What a log's page opens with. `counts` are of its columns, when it has been looked into. */
export function logSentence(
  log: Pick<Log, 'status' | 'channels' | 'durationS' | 'problems'>,
  counts: ColumnCounts | null,
): Sentence {
  switch (log.status) {
    case 'uploading': return ['This log is still arriving.']
    case 'queued': return ['This log waits to be read.']
    case 'processing': return ['This log is being read.']
    case 'refused': return ['This log gives no laps.']
    case 'mapping': return columnsSentence(counts)
    case 'no_lines': return [...readSentence(log), ' The timing lines are still missing.']
    case 'ready': return readSentence(log)
  }
}

function columnsSentence(counts: ColumnCounts | null): Sentence {
  if (!counts) return ['The columns of this log are not known yet.']
  if (counts.missing.length) return [`No column is marked as ${counts.missing.join(' or ')}: laps need time, latitude and longitude.`]
  const matched = counts.used === counts.total
    ? `All of its ${countInWords(counts.total, 'column')} are matched`
    : `${asSentence(countInWords(counts.used, 'column'))} of ${counts.total} ${counts.used === 1 ? 'is' : 'are'} matched`
  const kept = counts.kept ? `, ${countInWords(counts.kept, 'is', 'are')} kept under ${counts.kept === 1 ? 'its own name' : 'their own names'}` : ''
  if (counts.doubtful === 0) return [`${matched}${kept}; none wants a second look.`]
  return [`${matched}${kept}; ${countInWords(counts.doubtful, 'guess wants', 'guesses want')} a look.`]
}

function readSentence(log: Pick<Log, 'channels' | 'durationS' | 'problems'>): Sentence {
  const minutes = log.durationS === null ? null : Math.max(1, Math.round(log.durationS / 60))
  const count = log.channels.length
  const what: Sentence = count > 12 ? [{ fig: String(count) }, ' channels'] : [asSentence(countInWords(count, 'channel'))]
  const over: Sentence = minutes === null ? [] : [' over ', { fig: `${minutes} min` }]
  const rows = log.problems.length === 0 ? ', without a problem in the rows.' : ', with something to know about the rows.'
  return [...what, ...over, count === 1 ? ' is read' : ' are read', rows]
}
