import { describe, expect, it } from 'vitest'
import { countingCrossings, lapDistance, odometer, passings, refuseTooMany, usualSense } from '../../../../../server/utils/laps/passes'
import type { Pass } from '../../../../../server/utils/laps/passes'

/** Crossings by distance driven; ten metres a second. */
function pass(distanceM: number, sense: 1 | -1 = 1, offsetM = 0, gap: Pass['gap'] = 'none'): Pass {
  return { distanceM, timeS: distanceM / 10, sense, offsetM, gap, offSquareDeg: 0, sample: 0 }
}

const at = (passes: Pass[]) => passes.map(({ distanceM }) => distanceM)

describe('odometer', () => {
  it('measures a straight, and stands while the car does', () => {
    const xM = Array.from({ length: 1001 }, (_, k) => k < 500 ? k * 0.5 : 250 + 0.4 * Math.sin(k * 7.3))
    const distanceM = odometer(xM, xM.map(() => 0))
    // In steps of 2 m: at most that much behind, and one step where the car comes to rest, 2.5 m with the sway.
    expect(distanceM[499]).toBeGreaterThanOrEqual(247.5)
    expect(distanceM[499]).toBeLessThanOrEqual(249.5)
    expect(distanceM[1000]! - distanceM[499]!).toBeLessThanOrEqual(2.5)
  })
})

describe('refuseTooMany', () => {
  const laps = (count: number) => Array.from({ length: count }, (_, k) => pass(k * 900))

  it('refuses more than 2000 crossings of a line', () => {
    expect(() => refuseTooMany(laps(2000))).not.toThrow()
    expect(() => refuseTooMany(laps(2001))).toThrow(expect.objectContaining({ code: 'line_crossed_too_often' }))
  })

  it('lets a car wait on the line, but not crawl along it', () => {
    const noise = Array.from({ length: 9000 }, (_, k) => pass(5000 + k * 0.001, k % 2 ? 1 : -1, 2 * Math.sin(k)))
    expect(() => refuseTooMany([...laps(5), ...noise])).not.toThrow()
    const along = Array.from({ length: 9000 }, (_, k) => pass(k * 5, k % 2 ? 1 : -1, k * 5))
    expect(() => refuseTooMany(along)).toThrow(expect.objectContaining({ code: 'line_crossed_too_often' }))
  })
})

describe('passings', () => {
  it('a car that waits on the line has passed once, one that turns round not at all', () => {
    expect(at(passings([pass(100), pass(101, -1), pass(101), pass(900), pass(905, -1)]))).toEqual([100])
    expect(passings([pass(100, -1), pass(101), pass(102, -1)])[0]!.sense).toBe(-1)
  })

  it('two legs of a hairpin under one line are two', () => {
    expect(passings([pass(100, 1, -8), pass(140, -1, 8)])).toHaveLength(2)
  })
})

describe('usualSense', () => {
  it('is the majority', () => {
    expect(usualSense([pass(0, -1), pass(1000, -1), pass(2000, 1), pass(3000, -1)])).toBe(-1)
    expect(usualSense([pass(0, 1)])).toBe(1)
    expect(usualSense([])).toBe(1)
  })

  it('of two straights is that of the one nearest to the middle', () => {
    const both = [0, 1000, 2000].flatMap(d => [pass(d, 1, -55), pass(d + 500, -1, 4)])
    expect(usualSense(both)).toBe(-1)
    expect(usualSense(both.slice(0, -1))).toBe(-1)
  })

  it('driven both ways at one place as often is that of the first', () => {
    expect(usualSense([pass(0, -1), pass(1000, 1)])).toBe(-1)
  })
})

describe('lapDistance', () => {
  it('is not moved by waiting or by a lap that missed the line', () => {
    const waiting = Array.from({ length: 50 }, (_, k) => pass(3000 + k * 0.3))
    expect(lapDistance([pass(0), ...waiting, pass(6020), pass(9015), pass(15040), pass(18030)])).toBeCloseTo(3000, -2)
  })

  it('looks at one place at a time', () => {
    expect(lapDistance([0, 1000, 2000].flatMap(d => [pass(d), pass(d + 400, 1, 40)]))).toBe(1000)
  })

  it('is unknown after one crossing', () => {
    expect(lapDistance([pass(10)])).toBeNaN()
    expect(lapDistance([])).toBeNaN()
  })
})

describe('countingCrossings', () => {
  it('the first stands until a third of a lap has been driven', () => {
    const crossings = [0, 2, 299, 301, 900, 1199].map(distanceM => pass(distanceM))
    expect(at(countingCrossings(crossings, 1, 900))).toEqual([0, 301, 900])
  })

  it('takes one sense, and no crossing that the sides of a gap do not agree with', () => {
    const crossings = [pass(0), pass(400, -1), pass(900, 1, 0, 'disagrees'), pass(1800, 1, 0, 'agrees')]
    expect(at(countingCrossings(crossings, 1, 900))).toEqual([0, 1800])
  })

  it('of two straights in one sense the one nearest to the middle', () => {
    const both = [0, 1000, 2000].flatMap(d => [pass(d, 1, 30), pass(d + 400, 1, -3)])
    expect(at(countingCrossings(both, 1, 1000))).toEqual([400, 1400, 2400])
  })

  it('looks a whole lap back and ahead for the nearest one', () => {
    // A near crossing 0.9 laps before or after a far one silences it; one a full lap away does not.
    expect(at(countingCrossings([pass(0, 1, 2), pass(900, 1, 30)], 1, 1000))).toEqual([0])
    expect(at(countingCrossings([pass(0, 1, 30), pass(900, 1, 2)], 1, 1000))).toEqual([900])
    const apart = [pass(0, 1, 30), pass(1000, 1, 2), pass(2000, 1, 30)]
    expect(at(countingCrossings(apart, 1, 1000))).toEqual([0, 1000, 2000])
    expect(at(countingCrossings([pass(0, 1, 30), pass(90_000, 1, 2)], 1, Number.NaN))).toEqual([90_000])
  })

  it('keeps a lap that ends on the far side of one straight', () => {
    const crossings = [pass(0, 1, 1), pass(1000, 1, 20), pass(2000, 1, 1)]
    expect(at(countingCrossings(crossings, 1, 1000))).toEqual([0, 1000, 2000])
  })

  it('a lap of unknown length is at least 150 m', () => {
    expect(at(countingCrossings([pass(0), pass(3), pass(49)], 1, Number.NaN))).toEqual([0])
  })
})
