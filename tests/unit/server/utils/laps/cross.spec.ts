import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findCrossings } from '../../../../../server/utils/laps/cross'
import { gapAfterSample } from '../../../../../server/utils/laps/hermite'
import type { Gap } from '../../../../../server/utils/laps/hermite'
import { times } from '../../../../support/synthetic-track'

/** Across the x axis at x = 0, 10 m either way; a car driving east goes from its left to its right. */
const LINE = { ax: 0, ay: -10, bx: 0, by: 10 }

type ByTime = (t: number) => number

function along(timeS: number[], x: ByTime, y: ByTime = () => 0, line = LINE, gaps: Gap[] = []) {
  return findCrossings(timeS, timeS.map(x), timeS.map(y), null, null, line, gapAfterSample(timeS, gaps))
}

describe('findCrossings on a straight', () => {
  it.each([25, 10, 1])('is exact for constant acceleration at %i Hz', (rateHz) => {
    // -100 m at 30 m/s braking at 4 m/s2: the quadratic's own root. Tolerance: rounding.
    const truth = (30 - Math.sqrt(30 ** 2 - 2 * 4 * 100)) / 4
    const [crossing, ...more] = along(times(0, 7, rateHz), t => -100 + 30 * t - 2 * t * t, () => 3)
    expect(more).toEqual([])
    expect(crossing!.timeS).toBeCloseTo(truth, 10)
    expect(crossing!.sense).toBe(-1)
    expect(crossing!.offsetM).toBeCloseTo(3, 10)
    expect(crossing!.offSquareDeg).toBeCloseTo(0, 8)
    expect(crossing!.gap).toBe('none')
  })

  it('is closer than a straight line between samples: OpenStax College Physics, example 2.15', () => {
    // 200 m from 10 m/s at 2 m/s2 take 10.0 s. Between samples at 7 and 11 s a straight line would say 9.893 s.
    const [crossing] = along([0, 3, 7, 11, 15], t => -200 + 10 * t + t * t)
    expect(crossing!.timeS).toBeCloseTo(10, 10)
  })

  it('tells the angle off square', () => {
    const [crossing] = along(times(0, 2, 10), t => -10 + 10 * t, t => -5.5 + 5 * t)
    expect(crossing!.offSquareDeg).toBeCloseTo(Math.atan2(5, 10) * 180 / Math.PI, 8)
  })

  it('takes velocities from the caller', () => {
    const [crossing] = findCrossings([0, 1], [-1, 1], [0, 0], [0, 0], [0, 0], LINE)
    // At rest at both ends: the smooth step 3u^2 - 2u^3, which is half at half.
    expect(crossing!.timeS).toBeCloseTo(0.5, 12)
    const [late] = findCrossings([0, 1], [-3, 1], [0, 0], [0, 0], [0, 0], LINE)
    const u = late!.timeS
    expect(3 * u * u - 2 * u ** 3).toBeCloseTo(0.75, 10)
  })

  it('never counts on the extension of the line', () => {
    expect(along(times(0, 2, 10), t => -10 + 10 * t, () => 10.001)).toEqual([])
    expect(along(times(0, 2, 10), t => -10 + 10 * t, () => 9.999)).toHaveLength(1)
    expect(along(times(0, 2, 10), t => -10 + 10 * t, () => -10.001)).toEqual([])
  })

  it('the line drawn the other way has the same instants with the other sense', () => {
    const between = (min: number, max: number) => fc.double({ min, max, noNaN: true })
    const cases = fc.tuple(between(1, 60), between(-9, 9), between(-3, 3))
    fc.assert(fc.property(cases, ([speed, y, bend]) => {
      const timeS = times(0, 20, 10)
      const forth = along(timeS, t => -47 + speed * t + bend * t * t / 2, () => y)
      const back = along(timeS, t => -47 + speed * t + bend * t * t / 2, () => y, { ax: 0, ay: 10, bx: 0, by: -10 })
      expect(back.length).toBe(forth.length)
      forth.forEach((crossing, k) => {
        expect(back[k]!.timeS).toBeCloseTo(crossing.timeS, 9)
        expect(back[k]!.sense).toBe(-crossing.sense)
        expect(back[k]!.offsetM).toBeCloseTo(-crossing.offsetM, 9)
      })
    }))
  })
})

describe('findCrossings in a bend', () => {
  // Circle of 60 m at 20 m/s, crossed at an angle of 45 degrees round. Bound 0.016 h^3 v w^2 / v of the docstring,
  // doubled.
  it.each([[25, 2e-6], [10, 4e-6 * 10], [1, 4e-3]])('at %i Hz within %f s', (rateHz, toleranceS) => {
    const timeS = times(0.013, 9.4, rateHz)
    const w = 20 / 60
    const line = { ax: 50 * Math.SQRT1_2, ay: 50 * Math.SQRT1_2, bx: 70 * Math.SQRT1_2, by: 70 * Math.SQRT1_2 }
    const [crossing] = along(timeS, t => 60 * Math.cos(w * t), t => 60 * Math.sin(w * t), line)
    expect(Math.abs(crossing!.timeS - Math.PI / 4 / w)).toBeLessThan(toleranceS)
    expect(crossing!.offSquareDeg).toBeLessThan(1)
  })
})

describe('findCrossings at awkward places', () => {
  it('a sample exactly on the line counts once, from either side', () => {
    for (const way of [1, -1]) {
      const crossings = along(times(0, 4, 1), t => way * (t - 2) * 10)
      expect(crossings.map(crossing => crossing.timeS)).toEqual([2])
    }
  })

  it('several samples on the line count once', () => {
    for (const way of [1, -1]) {
      const x = [-20, -10, 0, 0, 0, 10, 20].map(value => way * value)
      const crossings = findCrossings([0, 1, 2, 3, 4, 5, 6], x, x.map(() => 0), null, null, LINE)
      const net = crossings.reduce((sum, crossing) => sum + crossing.sense, 0)
      // The smooth curve may sway about the line while it stands there; the sum is one crossing, and all lie in the
      // wait.
      expect(net).toBe(-way)
      expect(crossings.every(crossing => crossing.timeS >= 1.9 && crossing.timeS <= 4.1)).toBe(true)
    }
  })

  it('touching the line in one sample and turning back is no crossing', () => {
    for (const way of [1, -1]) {
      expect(along(times(0, 4, 1), t => way * (t - 2) ** 2)).toEqual([])
      expect(along(times(0, 4, 1), t => way * Math.abs(t - 2) * 10)).toEqual([])
    }
  })

  it('over and back between two samples is found both ways', () => {
    const crossings = along([0, 1, 2, 3], t => 0.9 - (t - 1.5) ** 2 * 2, () => 0)
    expect(crossings.map(crossing => crossing.sense)).toEqual([-1, 1])
    // The roots of the parabola, which three-point differences do not change.
    expect(crossings[0]!.timeS).toBeCloseTo(1.5 - Math.sqrt(0.45), 9)
    expect(crossings[1]!.timeS).toBeCloseTo(1.5 + Math.sqrt(0.45), 9)
  })

  it('a standing car far from the line, and no path at all', () => {
    expect(along(times(0, 4, 1), () => 5)).toEqual([])
    expect(findCrossings([], [], [], null, null, LINE)).toEqual([])
    expect(findCrossings([0], [0], [0], null, null, LINE)).toEqual([])
  })

  it('refuses a line without length', () => {
    expect(() => findCrossings([0, 1], [0, 1], [0, 1], null, null, { ax: 1, ay: 1, bx: 1, by: 1 }))
      .toThrow(expect.objectContaining({ code: 'line_without_length' }))
  })
})

describe('findCrossings in a gap', () => {
  const timeS = [...times(0, 4, 10), ...times(7, 11, 10)]
  const gaps = [{ fromS: 4, toS: 7 }]

  it('agrees with a car that brakes steadily through it, and is exact', () => {
    const [crossing] = along(timeS, t => -200 + 40 * t - t * t, () => 0, LINE, gaps)
    expect(crossing!.gap).toBe('agrees')
    expect(crossing!.timeS).toBeCloseTo(20 - Math.sqrt(200), 8)
  })

  it('does not agree when the way is much longer than the speed says', () => {
    const [crossing] = along(timeS, t => t <= 4 ? -200 + 20 * t : 300 + 20 * t, () => 0, LINE, gaps)
    expect(crossing!.gap).toBe('disagrees')
    // Somewhere inside it, on the straight line between its edges: from -120 m at 4 s to 440 m at 7 s.
    expect(crossing!.timeS).toBeCloseTo(4 + 3 * 120 / 560, 9)
  })

  it.each([[1.15, 'agrees'], [1.6, 'disagrees']])('a way %f times as long as the speed says %s', (longer, gap) => {
    // 60 m at 20 m/s for 3 s; a quarter and 2 m are allowed: up to 77 m.
    const [crossing] = along(timeS, t => t <= 4 ? -100 + 20 * t : -160 + 60 * longer + 20 * t, () => 0, LINE, gaps)
    expect(crossing!.gap).toBe(gap)
  })

  it('does not mark a crossing elsewhere', () => {
    expect(along(timeS, t => -20 + 10 * t, () => 0, LINE, gaps)[0]!.gap).toBe('none')
  })
})
