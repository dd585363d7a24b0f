import { describe, expect, it } from 'vitest'
import { plain } from '../../../shared/compare-words'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { trialSentence } from '../../../shared/line-words'

const start = { kind: 'start_finish' } as const
const sector = { kind: 'sector' } as const
const trial = { timedLaps: 7, bestS: 90.869, lines: [], warnings: [] }
const now = { mayEdit: true, stored: true }

type Given = Parameters<typeof trialSentence>
const standard = makeFigures(STANDARD_CHOICE)
const said = (lines: Given[0], trial: Given[1], now: Given[2]) =>
  plain(trialSentence(lines, trial, now, standard))

describe('trialSentence', () => {
  it('says what to do first', () => {
    expect(said([], null, now)).toBe('No lines yet: draw the start and finish line across the track.')
    expect(said([], null, { ...now, mayEdit: false })).not.toContain('draw the')
    expect(said([sector], trial, now)).toContain('a start and finish line is missing')
  })

  it('says what the lines do, and would do while they are not saved', () => {
    expect(said([start, sector, sector], trial, now)).toBe('Three lines cut seven timed laps out of this log, the best in 1:30.869.')
    expect(said([start], { ...trial, timedLaps: 1 }, { ...now, stored: false })).toBe('One line would cut one timed lap out of this log, the best in 1:30.869.')
  })

  it('says when no lap comes of it, and nothing more than it knows', () => {
    expect(said([start], { ...trial, timedLaps: 0, bestS: null }, now)).toContain('cuts no timed lap out of this log')
    expect(said([start], null, now)).toBe('One line on this layout.')
  })
})
