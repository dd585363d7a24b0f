import { describe, expect, it } from 'vitest'
import { gaussian, makeRandom } from '../../../../seeds/harrow-fell/random'

describe('makeRandom', () => {
  it('repeats for a seed and differs between seeds', () => {
    const draw = (seed: number) => Array.from({ length: 20 }, makeRandom(seed))
    expect(draw(7)).toEqual(draw(7))
    expect(draw(7)).not.toEqual(draw(8))
  })

  it('spreads evenly over [0, 1)', () => {
    const random = makeRandom(1)
    const counts = new Array<number>(10).fill(0)
    for (let i = 0; i < 100_000; i++) {
      const value = random()
      // A value outside [0, 1) finds no counter and leaves the sum short.
      if (value >= 0 && value < 1) counts[Math.floor(value * 10)]!++
    }
    expect(counts.reduce((a, b) => a + b, 0)).toBe(100_000)
    const chiSquared = counts.reduce((sum, count) => sum + (count - 10_000) ** 2 / 10_000, 0)
    // 99.9 % point of chi-squared with 9 degrees of freedom
    // (NIST/SEMATECH e-Handbook of Statistical Methods, section 1.3.6.7.4).
    expect(chiSquared).toBeLessThan(27.877)
  })
})

describe('gaussian', () => {
  it('has mean 0, standard deviation 1 and a third of its draws beyond it', () => {
    const random = makeRandom(2)
    const n = 100_000
    const draws = Array.from({ length: n }, () => gaussian(random))
    const mean = draws.reduce((a, b) => a + b, 0) / n
    const sd = Math.sqrt(draws.reduce((a, b) => a + (b - mean) ** 2, 0) / n)
    // Four standard errors: 1 / sqrt(n) for the mean, 1 / sqrt(2 n) for the deviation, sqrt(p q / n) for the share.
    expect(Math.abs(mean)).toBeLessThan(4 / Math.sqrt(n))
    expect(Math.abs(sd - 1)).toBeLessThan(4 / Math.sqrt(2 * n))
    const beyond = draws.filter(draw => Math.abs(draw) > 1).length / n
    expect(Math.abs(beyond - 0.31731)).toBeLessThan(4 * Math.sqrt(0.31731 * 0.68269 / n))
  })
})
