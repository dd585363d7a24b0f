import { describe, expect, it } from 'vitest'
import { logSentence } from '../../../shared/log-sheet'
import type { ColumnCounts } from '../../../shared/log-columns'
import { LOG_STATUSES, type LogProblem, type LogStatus } from '../../../shared/schemas/logs'

const channel = { name: 'speed', label: 'Speed', unit: 'm/s', rateHz: 25 }

function says(status: LogStatus, counts: ColumnCounts | null = null, problems: LogProblem[] = []): string {
  const log = { status, channels: Array.from({ length: 8 }, () => channel), durationS: 1234, problems }
  return logSentence(log, counts).map(part => typeof part === 'string' ? part : part.fig).join('')
}

describe('logSentence', () => {
  it('has a sentence of its own for every status', () => {
    expect(new Set(LOG_STATUSES.map(status => says(status))).size).toBe(LOG_STATUSES.length)
  })

  it('counts what is matched and what wants a look', () => {
    const counts = { used: 9, kept: 0, total: 11, doubtful: 3, missing: [] }
    expect(says('mapping', counts)).toBe('Nine columns of 11 are matched; three guesses want a look.')
    expect(says('mapping', { ...counts, used: 4, total: 4, doubtful: 1 })).toBe('All of its four columns are matched; one guess wants a look.')
    expect(says('mapping', { ...counts, used: 1, total: 4, doubtful: 0 })).toBe('One column of 4 is matched; none wants a second look.')
    expect(says('mapping', { ...counts, kept: 2 }))
      .toBe('Nine columns of 11 are matched, two are kept under their own names; three guesses want a look.')
    expect(says('mapping', { ...counts, missing: ['latitude', 'longitude'] }))
      .toBe('No column is marked as latitude or longitude: laps need time, latitude and longitude.')
  })

  it('says what was read and whether rows had problems', () => {
    expect(says('ready')).toBe('Eight channels over 21 min are read, without a problem in the rows.')
    expect(says('ready', null, [{ code: 'bad_cell', message: 'x' }])).toBe('Eight channels over 21 min are read, with something to know about the rows.')
    expect(says('no_lines')).toContain('The timing lines are still missing.')
  })
})
