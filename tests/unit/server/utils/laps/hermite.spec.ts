import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cubicAt, cubicSlope, gapAfterSample, hermite, threePointSlope } from '../../../../../server/utils/laps/hermite'
import type { Gap } from '../../../../../server/utils/laps/hermite'

const number = fc.double({ min: -100, max: 100, noNaN: true })

describe('hermite', () => {
  it('has the values and slopes that were asked for', () => {
    fc.assert(fc.property(number, number, number, number, (p0, m0, p1, m1) => {
      const cubic = hermite(p0, m0, p1, m1)
      // Rounding of numbers below 1000.
      expect(cubicAt(cubic, 0)).toBeCloseTo(p0, 12)
      expect(cubicSlope(cubic, 0)).toBeCloseTo(m0, 12)
      expect(cubicAt(cubic, 1)).toBeCloseTo(p1, 9)
      expect(cubicSlope(cubic, 1)).toBeCloseTo(m1, 9)
    }))
  })
})

describe('threePointSlope', () => {
  it('is exact for a parabola on uneven samples, ends included', () => {
    const timeS = [0, 0.3, 0.4, 1.1, 1.2, 2]
    const values = timeS.map(t => 3 - 2 * t + 5 * t * t)
    const slope = threePointSlope(timeS, values, new Uint8Array(6))
    timeS.forEach((t, i) => expect(slope[i]).toBeCloseTo(-2 + 10 * t, 10))
  })

  it('does not look over a gap', () => {
    const timeS = [0, 1, 2, 7, 8, 9]
    const values = [0, 1, 2, 100, 98, 96]
    const slope = threePointSlope(timeS, values, gapAfterSample(timeS, [{ fromS: 2, toS: 7 }]))
    // 1 per second before it, -2 after it: exact for straight lines.
    expect(Array.from(slope)).toEqual([1, 1, 1, -2, -2, -2])
  })

  it('makes do with two samples, and with one between two gaps', () => {
    expect(Array.from(threePointSlope([0, 2], [0, 6], new Uint8Array(2)))).toEqual([3, 3])
    expect(Array.from(threePointSlope([0, 2, 3], [0, 6, 7], Uint8Array.of(1, 1, 0)))).toEqual([3, 3, 1])
    expect(Array.from(threePointSlope([5], [1], new Uint8Array(1)))).toEqual([0])
  })
})

describe('gapAfterSample', () => {
  it('marks the stretches that overlap a gap, in any order of gaps', () => {
    const timeS = [0, 1, 2, 3, 4, 5]
    const marks = (gaps: Gap[]) => Array.from(gapAfterSample(timeS, gaps))
    expect(marks([{ fromS: 4, toS: 5 }, { fromS: 1, toS: 2.5 }])).toEqual([0, 1, 1, 0, 1, 0])
    expect(marks([{ fromS: 1, toS: 2 }])).toEqual([0, 1, 0, 0, 0, 0])
    expect(marks([])).toEqual([0, 0, 0, 0, 0, 0])
  })
})
