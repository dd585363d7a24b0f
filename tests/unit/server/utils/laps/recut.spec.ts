import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { matchLaps } from '../../../../../server/utils/laps/recut'
import type { CutLap } from '../../../../../server/utils/laps/types'

function cut(startS: number, timeS: number, kind: CutLap['kind'] = 'timed'): CutLap {
  return { number: 1, kind, startS, timeS, sectorsS: [], flags: [] }
}

describe('matchLaps', () => {
  const old = [
    { id: 'out', startS: 0, timeS: 50, kind: 'out' },
    { id: 'one', startS: 50, timeS: 90, kind: 'timed' },
    { id: 'two', startS: 140, timeS: 90, kind: 'timed' },
  ]

  it('a line moved a little keeps every lap', () => {
    expect(matchLaps(old, [cut(0, 60, 'out'), cut(60, 90), cut(150, 91)])).toEqual(['out', 'one', 'two'])
  })

  it('a lap cut in two, or two joined, keep nothing: exactly half is not more than half', () => {
    expect(matchLaps(old, [cut(50, 45), cut(95, 45)])).toEqual([null, null])
    expect(matchLaps(old, [cut(50, 180)])).toEqual([null])
  })

  it('an out lap does not become a timed lap', () => {
    expect(matchLaps(old, [cut(0, 50, 'timed')])).toEqual([null])
  })

  it('gives no id twice, and every lap its own when nothing moved', () => {
    const laps = fc.array(fc.double({ min: 1, max: 200, noNaN: true }), { minLength: 1, maxLength: 12 })
    fc.assert(fc.property(laps, laps, (before, after) => {
      const sum = (durations: number[]) => durations.reduce((total, s) => total + s, 0)
      const placed = (durations: number[]) =>
        durations.map((timeS, k) => ({ timeS, startS: sum(durations.slice(0, k)) }))
      const stored = placed(before).map((lap, k) => ({ ...lap, id: `${k}`, kind: 'timed' }))
      const ids = matchLaps(stored, placed(after).map(lap => cut(lap.startS, lap.timeS))).filter(id => id !== null)
      expect(new Set(ids).size).toBe(ids.length)
      expect(matchLaps(stored, stored.map(lap => cut(lap.startS, lap.timeS)))).toEqual(stored.map(lap => lap.id))
    }))
  })

  it('overlapping old laps are taken once each, the larger overlap first', () => {
    const twins = [{ id: 'a', startS: 0, timeS: 100, kind: 'timed' }, { id: 'b', startS: 10, timeS: 100, kind: 'timed' }]
    expect(matchLaps(twins, [cut(10, 100), cut(5, 100)])).toEqual(['b', 'a'])
  })
})
