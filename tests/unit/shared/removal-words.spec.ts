import { describe, expect, it } from 'vitest'
import {
  carStays, circuitStays, dateInWords, dayStays, layoutStays, outingGoes, outingStays, setupIsBase, setupStays,
} from '../../../shared/removal-words'

const one = { count: 1, lastDate: '2026-09-12' }
const three = { count: 3, lastDate: '2026-01-02' }

describe('what keeps something from being removed', () => {
  it.each([
    [circuitStays(one), '1 track day was held at this circuit, on 12 September 2026: remove that day first.'],
    [circuitStays(three), '3 track days were held at this circuit, the last on 2 January 2026: remove those days first.'],
    [layoutStays(one), '1 outing was driven on this layout, on 12 September 2026: move that outing to another layout or remove it first.'],
    [layoutStays(three), '3 outings were driven on this layout, the last on 2 January 2026: move those outings to another layout or remove them first.'],
    [carStays(three), '3 outings were driven in this car, the last on 2 January 2026: put another car on those outings or remove them first.'],
    [setupStays(one), '1 outing was driven with this revision, on 12 September 2026: put another revision on that outing or remove it first.'],
    [setupIsBase([3]), 'Revision 3 is based on this one and shows what it changed: remove that one first.'],
    [setupIsBase([3, 4, 7]), 'Revisions 3, 4 and 7 are based on this one and show what they changed: remove those first.'],
    [dayStays(1), '1 outing stands on this day: remove that outing first.'],
    [dayStays(4), '4 outings stand on this day: remove them first.'],
    [outingStays([]), 'This outing has laps: remove them first.'],
    [outingStays([{ fileName: 'a.csv', lapCount: 1 }]), 'The log a.csv with 1 lap belongs to this outing: remove the log first, or remove both together on the outing’s page.'],
    [outingStays([{ fileName: 'a.csv', lapCount: 9 }, { fileName: 'b.csv', lapCount: 2 }]), '2 logs with 11 laps belong to this outing: remove the logs first, or remove all together on the outing’s page.'],
  ])('is said in words: %s', (found, expected) => {
    expect(found).toBe(expected)
  })

  it('is named before an outing goes', () => {
    expect(outingGoes({ logs: [], lapCount: 0 })).toBe('The outing goes with what was written down about it.')
    expect(outingGoes({ logs: ['a.csv'], lapCount: 1 })).toBe('The outing goes, and with it its log and 1 lap: a.csv.')
    expect(outingGoes({ logs: ['a.csv', 'b.csv'], lapCount: 11 })).toBe('The outing goes, and with it its 2 logs and 11 laps: a.csv, b.csv.')
  })

  it('dates are written out', () => {
    expect(['2026-02-01', '2024-12-31'].map(dateInWords)).toEqual(['1 February 2026', '31 December 2024'])
  })
})
