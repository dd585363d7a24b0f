import { describe, expect, it } from 'vitest'
import { indexBefore, interpolate } from '../../../../../server/utils/laps/interpolate'

describe('indexBefore', () => {
  it('finds the last value not above', () => {
    expect([-1, 0, 0.5, 1, 7].map(at => indexBefore([0, 1, 2], at))).toEqual([-1, 0, 0, 1, 2])
    expect(indexBefore([], 1)).toBe(-1)
  })
})

describe('interpolate', () => {
  it('draws straight lines, and nothing outside', () => {
    expect(Array.from(interpolate([0, 1, 3], [10, 20, 0], [-1, 0, 0.5, 1, 2, 3, 4], 9)))
      .toEqual([Number.NaN, 10, 15, 20, 10, 0, Number.NaN])
  })

  it('joins a narrow hole and leaves a wide one', () => {
    const at = [0, 1, 2, 3, 4, 5]
    const values = [0, Number.NaN, 2, Number.NaN, Number.NaN, 5]
    expect(Array.from(interpolate(at, values, [1, 2, 3.5, 5], 2))).toEqual([1, 2, Number.NaN, 5])
  })

  it('joins neighbours however far apart', () => {
    expect(Array.from(interpolate([0, 100], [0, 100], [50], 0.5))).toEqual([50])
  })

  it('gives nothing of nothing', () => {
    expect(Array.from(interpolate([0, 1], [Number.NaN, Number.NaN], [0, 1], 1))).toEqual([Number.NaN, Number.NaN])
  })
})
