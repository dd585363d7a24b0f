import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { extentOf, nearestStation, pairBrakings, roundAxis, splitAtZero, steepestStretch, tracePoints, widestApart } from '../../../shared/compare-series'

const rising = (a: number, b: number) => a - b
const braking = (onsetM: number) => ({ onsetM, onsetSpeedMps: 40, releaseM: onsetM + 60, peakMps2: 9 })

describe('pairBrakings', () => {
  it('puts the same corner in one row and counts along the lap', () => {
    const rows = pairBrakings([681, 1560, 2400].map(braking), [100, 690, 1555].map(braking))
    expect(rows.map(row => [row.number, row.lap?.onsetM, row.against?.onsetM, row.earlierM])).toEqual([
      [1, undefined, 100, null],
      [2, 681, 690, -9],
      [3, 1560, 1555, 5],
      [4, 2400, undefined, null],
    ])
  })

  it('never uses a braking twice and loses none', () => {
    const onsets = fc.uniqueArray(fc.integer({ min: 0, max: 3000 }), { maxLength: 14 })
      .map(list => list.sort(rising).map(braking))
    fc.assert(fc.property(onsets, onsets, (mine, other) => {
      const rows = pairBrakings(mine, other)
      const onsetsOf = (side: 'lap' | 'against') => rows.flatMap(row => row[side]?.onsetM ?? []).sort(rising)
      expect(onsetsOf('lap')).toEqual(mine.map(one => one.onsetM))
      expect(onsetsOf('against')).toEqual(other.map(one => one.onsetM))
      for (const row of rows) if (row.earlierM !== null) expect(Math.abs(row.earlierM)).toBeLessThanOrEqual(80)
    }))
  })
})

describe('nearestStation', () => {
  it('is the nearest of all', () => {
    const stations = fc.uniqueArray(fc.integer({ min: 0, max: 5000 }), { minLength: 1, maxLength: 60 })
      .map(list => list.sort(rising))
    fc.assert(fc.property(stations, fc.double({ min: -100, max: 5100, noNaN: true }), (stationM, atM) => {
      const found = Math.abs(stationM[nearestStation(stationM, atM)]! - atM)
      expect(found).toBe(Math.min(...stationM.map(one => Math.abs(one - atM))))
    }))
  })
})

describe('tracePoints and extentOf', () => {
  it('scale what is there and keep what is missing', () => {
    expect(tracePoints([0, 1], [10, null], 3.6)).toEqual([[0, 36], [1, null]])
    expect(extentOf([3, null, -1], [7])).toEqual({ low: -1, high: 7 })
    expect(extentOf([null])).toBeNull()
  })
})

describe('roundAxis', () => {
  it('holds the values in round steps', () => {
    expect(roundAxis({ low: 62, high: 147 }, 5)).toEqual({ min: 60, max: 160, step: 20 })
    expect(roundAxis({ low: 0.02, high: 0.613 }, 4, true)).toEqual({ min: 0, max: 0.8, step: 0.2 })
    expect(roundAxis({ low: 5, high: 5 }, 4).max).toBeGreaterThan(5 - 1e-9)
  })

  it('never cuts a value off nor takes more steps than allowed', () => {
    const value = fc.double({ min: -500, max: 500, noNaN: true })
    fc.assert(fc.property(value, value, fc.integer({ min: 2, max: 8 }), (p, q, steps) => {
      const [low, high] = [Math.min(p, q), Math.max(p, q)]
      const axis = roundAxis({ low, high }, steps)
      // A billionth of a step is the slack that keeps 0.6 from becoming 0.8.
      expect(axis.min).toBeLessThanOrEqual(low + 1e-6 * axis.step)
      expect(axis.max).toBeGreaterThanOrEqual(high - 1e-6 * axis.step)
      expect(Math.round((axis.max - axis.min) / axis.step)).toBeLessThanOrEqual(steps)
    }))
  })
})

describe('widestApart', () => {
  it('finds the place and who is ahead there', () => {
    expect(widestApart([0, 10, 20], [5, 1, null], [4, 6, 90])).toEqual({ atM: 10, by: -5 })
    expect(widestApart([0], [null], [1])).toBeNull()
  })
})

describe('steepestStretch', () => {
  it('finds where most was lost, and where most was gained', () => {
    const stationM = [0, 100, 200, 300]
    expect(steepestStretch(stationM, [0, 0.3, 0.1, 0.2], 100, 1)).toEqual({ fromM: 0, toM: 100, changeS: 0.3 })
    expect(steepestStretch(stationM, [0, 0.3, 0.1, 0.2], 100, -1)!.fromM).toBe(100)
    expect(steepestStretch(stationM, [0, 0, 0, 0], 100, 1)).toBeNull()
  })
})

describe('splitAtZero', () => {
  it('puts the point of zero into both parts', () => {
    expect(splitAtZero([[0, -1], [10, 1], [20, null], [30, 0]])).toEqual({
      above: [[0, null], [5, 0], [10, 1], [20, null], [30, 0]],
      below: [[0, -1], [5, 0], [10, null], [20, null], [30, 0]],
    })
  })
})
