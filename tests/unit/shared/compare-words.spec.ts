import { describe, expect, it } from 'vitest'
import { findingOf, lapKeys, nameAgainst, plain, sectorRows } from '../../../shared/compare-words'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { shownDifferenceS } from '../../../shared/laps'
import { someComparison, someLap } from './compare-fixture'

const standard = makeFigures(STANDARD_CHOICE)
type Changes = Parameters<typeof someComparison>[0]
const lead = (changes: Changes = {}) => plain(findingOf(someComparison(changes), standard).lead)
const under = (changes: Changes = {}) => plain(findingOf(someComparison(changes), standard).under)
const { lap, against } = someComparison()

describe('findingOf', () => {
  it('opens with who was slower by how much and where most of it is', () => {
    expect(lead()).toBe('Lap 7 (1:31.482) is 0.613 s slower than lap 4 of outing 1. Two thirds of it was lost in sector 2.')
  })

  it('turns round with the laps', () => {
    expect(lead({ lap: against, against: lap })).toBe('Lap 4 (1:30.869) is 0.613 s faster than lap 7 of outing 3. Two thirds of it was gained in sector 2.')
  })

  it('says when one sector is more than the whole', () => {
    expect(lead({ lap: someLap({ sectorsS: [29.8, 31.811, 29.871] }) })).toContain('Sector 2 alone cost 0.811 s; other places gave some of it back.')
  })

  it('does not pick a sector when none has nearly half of it', () => {
    expect(lead({ lap: someLap({ sectorsS: [30.2, 31.207, 30.075] }) })).toContain('The time was lost in several sectors, nowhere most of it.')
  })

  it('falls back on the stretch of track where a sector time is missing or no line is drawn', () => {
    const expected = 'Most was lost between 100 m and 200 m: 0.400 s.'
    expect(lead({ sectorLinesM: [] })).toContain(expected)
    expect(lead({ lap: someLap({ sectorsS: [30.1, null, 29.971] }) })).toContain(expected)
  })

  it('calls equal times equal', () => {
    expect(lead({ lap: someLap({ timeS: 90.8692 }) })).toBe('Lap 7 (1:30.869) and lap 4 of outing 1 took the same time, to the millisecond.')
  })

  it('names the sectors, the doubts and the settings, and claims no cause', () => {
    const setting = { label: 'Rear spring', unit: 'N/mm', lap: 32, against: 28 }
    expect(under({ setupDifferences: [setting, setting] })).toBe('Sector 1 +0.100, sector 2 +0.411, sector 3 +0.102 s. Two settings differ between the setup sheets. Two laps cannot say whether the car, the driver or the day made the difference.')
    expect(under({ setupDifferences: [setting] })).toContain('One setting differs between')
    expect(under()).toContain('The setup sheets do not differ. Two laps cannot say')
    expect(under({ lap: someLap({ excluded: true, flags: ['gap_at_line'] }) })).toMatch(/is excluded.*its time is uncertain/)
    expect(under({ against: someLap() })).toContain('a habit or happened once')
    expect(under({ against: someLap({ car: { id: 'x', name: 'No. 12' } }) })).toContain('two different cars')
  })

  it('never claims a cause', () => {
    expect(lead() + under()).not.toMatch(/because|due to|thanks to|caused/)
  })
})

describe('nameAgainst and lapKeys', () => {
  it('say what tells the laps apart and no more', () => {
    expect(nameAgainst(lap, someLap({ number: 5 }), standard)).toBe('lap 5')
    expect(nameAgainst(lap, against, standard)).toBe('lap 4 of outing 1')
    expect(nameAgainst(lap, { ...against, day: { id: 'other', date: '2026-08-02', timeZone: 'UTC' } }, standard)).toBe('lap 4 of outing 1 on Sun 2 Aug 2026')
  })

  it('keep keys different', () => {
    expect(lapKeys(lap, against)).toEqual({ lap: 'lap 7', against: 'lap 4' })
    expect(lapKeys(lap, { ...against, number: 7 })).toEqual({ lap: 'lap 7, outing 3', against: 'lap 7, outing 1' })
    const elsewhere = lapKeys(lap, { ...lap, day: { ...lap.day, id: 'other' } })
    expect(elsewhere.lap).not.toBe(elsewhere.against)
  })
})

describe('sectorRows', () => {
  it('add up to the difference of the lap times', () => {
    const rows = sectorRows(someComparison())
    expect(rows.map(row => row.name)).toEqual(['sector 1', 'sector 2', 'sector 3'])
    expect(rows.map(row => row.fromM)).toEqual([0, 120, 260])
    // Sums of thousandths in binary: 1e-9 is far below what is shown.
    const sumS = rows.reduce((sum, row) => sum + row.differenceS!, 0)
    expect(sumS).toBeCloseTo(shownDifferenceS(lap.timeS, against.timeS), 9)
  })
})
