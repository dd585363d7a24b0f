import { describe, expect, it } from 'vitest'
import {
  isUnderWay, overlapWords, problemWords, progressWords, rowProblemWords, rowWords, STATUS_WORDS, stepStates, withNews,
} from '../../../shared/log-words'
import type { Lap } from '../../../shared/schemas/days'
import { LOG_STATUSES, LOG_STEPS } from '../../../shared/schemas/logs'

describe('words about a log', () => {
  it('has words for every status, all different', () => {
    expect(new Set(LOG_STATUSES.map(status => STATUS_WORDS[status])).size).toBe(LOG_STATUSES.length)
  })

  it('says the step and how far the whole is', () => {
    expect(progressWords({ status: 'processing', step: 'cut', fraction: 0.624 })).toBe('Cutting it into laps, 62 %')
    expect(progressWords({ status: 'processing', step: null, fraction: 0 })).toBe('Being read, 0 %')
    expect(progressWords({ status: 'queued', step: null, fraction: 0 })).toBe('waiting to be read')
  })

  it('knows which steps are done, which is now and which wait', () => {
    const states = (status: 'queued' | 'processing' | 'ready', step: string | null) => stepStates({ status, step }).map(each => each.state).join(' ')
    expect(states('processing', 'cut')).toBe('done done now waiting')
    expect(states('queued', null)).toBe('waiting waiting waiting waiting')
    expect(states('ready', null)).toBe('done done done done')
    expect(stepStates({ status: 'queued', step: null }).map(each => each.step)).toEqual([...LOG_STEPS])
  })

  it('keeps the step when news do not name one, unless the log begins anew', () => {
    const told = (status: 'queued' | 'processing' | 'ready', step: string | null, fraction: number) => ({ logId: 'a', status, step, fraction })
    const cutting = told('processing', 'cut', 0.7)
    expect(withNews(cutting, told('processing', null, 0))).toEqual(cutting)
    expect(withNews(cutting, told('processing', 'read', 0.1))).toEqual(told('processing', 'read', 0.1))
    expect(withNews(cutting, told('queued', null, 0))).toEqual(told('queued', null, 0))
    expect(withNews(cutting, told('ready', null, 1))).toEqual(told('ready', null, 1))
    expect(withNews(undefined, told('processing', null, 0))).toEqual(told('processing', null, 0))
  })

  it('tells logs that move by themselves from those that wait for a person', () => {
    expect(LOG_STATUSES.filter(isUnderWay)).toEqual(['uploading', 'queued', 'processing'])
  })

  it('says of a log whose worker was lost that it begins again, and shows no bar that stands', () => {
    const again = { logId: 'a', status: 'queued' as const, step: null, fraction: 0, restarted: true }
    expect(withNews({ logId: 'a', status: 'processing', step: 'cut', fraction: 0.8 }, again)).toEqual(again)
    expect(progressWords(again)).toBe('The worker was lost; the reading begins again by itself')
    expect(progressWords({ ...again, status: 'processing', step: 'read', fraction: 0.1 })).toBe('Reading the rows, 10 %')
  })

  it('says that there were problems in rows, and nothing where there were none', () => {
    expect(rowProblemWords({ rowProblems: 0 }, '0')).toBe('')
    expect(rowProblemWords({ rowProblems: 1 }, '1')).toBe('Something was wrong in 1 row.')
    expect(rowProblemWords({ rowProblems: 1339 }, '1,339')).toBe('Something was wrong in 1,339 rows.')
  })

  it('names the logs whose laps do not count beside those of an earlier one', () => {
    const logs = [{ id: 'a', fileName: 'first.csv' }, { id: 'b', fileName: 'second.csv' }]
    const lap = (logId: string, ...flags: string[]) => ({ logId, flags }) as unknown as Lap
    expect(overlapWords([lap('a'), lap('b')], logs)).toBe('')
    expect(overlapWords([lap('a'), lap('b', 'repeated')], logs)).toMatch(/^1 lap of second\.csv does not count: /)
    expect(overlapWords([lap('b', 'repeated'), lap('b', 'repeated')], logs)).toMatch(/^2 laps of second\.csv do not count: /)
  })

  it('writes the rows of a problem', () => {
    expect(rowWords({ row: 52881 })).toBe('row 52881')
    expect(rowWords({ row: 70902, count: 339 })).toBe('row 70902 and 338 more')
    expect(rowWords({})).toBe('')
    expect(problemWords({ message: 'No time here.', row: 10 })).toBe('No time here. (row 10)')
    expect(problemWords({ message: 'Backwards from line 10.', row: 10 })).toBe('Backwards from line 10.')
    expect(problemWords({ message: 'After 100 rows.', row: 10 })).toBe('After 100 rows. (row 10)')
    expect(problemWords({ message: 'Cut off.' })).toBe('Cut off.')
  })
})
