import { describe, expect, it } from 'vitest'
import { naturalSpline } from '../../../../seeds/harrow-fell/spline'

describe('naturalSpline', () => {
  const knots = [1, 3, -2, 0, 4, 4, 1]
  const curve = naturalSpline(10, 2, knots)

  it('passes through its knots and is straight at both ends', () => {
    knots.forEach((value, i) => expect(curve(10 + 2 * i).value).toBeCloseTo(value, 12))
    expect(curve(10).second).toBeCloseTo(0, 12)
    expect(curve(22).second).toBeCloseTo(0, 12)
  })

  it('has no jump in value, slope or second derivative at a knot', () => {
    for (let x = 12; x < 22; x += 2) {
      const [a, b] = [curve(x - 1e-9), curve(x + 1e-9)]
      // Slopes stay below 10, second and third derivatives too: 2e-9 apart they can move by 2e-8.
      expect(Math.abs(b.value - a.value)).toBeLessThan(2e-8)
      expect(Math.abs(b.first - a.first)).toBeLessThan(2e-8)
      expect(Math.abs(b.second - a.second)).toBeLessThan(2e-8)
    }
  })

  it('has the derivatives of its own values', () => {
    for (const x of [10.3, 13.7, 17.1, 21.9]) {
      const h = 1e-4
      const [a, m, b] = [curve(x - h), curve(x), curve(x + h)]
      // Central differences of a cubic err by h^2 times the third derivative, under 1e-7, and by rounding over h.
      expect(m.first).toBeCloseTo((b.value - a.value) / (2 * h), 6)
      expect(m.second).toBeCloseTo((b.first - a.first) / (2 * h), 6)
    }
  })

  it('goes on straight beyond its ends', () => {
    expect(curve(24).value).toBeCloseTo(1 + 2 * curve(22).first, 12)
    expect(curve(24).second).toBe(0)
  })

  it('reproduces a straight line', () => {
    const line = naturalSpline(0, 1, [0, 2, 4, 6])
    expect(line(1.37)).toEqual({ value: 2.74, first: 2, second: 0 })
  })
})
