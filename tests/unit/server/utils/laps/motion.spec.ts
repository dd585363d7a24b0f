import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { deriveMotion, quadraticWeights } from '../../../../../server/utils/laps/motion'
import { times } from '../../../../support/synthetic-track'

function circle(rateHz: number, radiusM: number, speedMps: number, turn: 1 | -1, seconds = 20) {
  const timeS = times(0, seconds, rateHz)
  const xM = timeS.map(t => radiusM * Math.cos(turn * speedMps / radiusM * t))
  const yM = timeS.map(t => radiusM * Math.sin(turn * speedMps / radiusM * t))
  return { timeS, xM, yM }
}

describe('quadraticWeights', () => {
  // A. Savitzky, M. J. E. Golay, Anal. Chem. 36 (1964), tables for degree 2. The smoothing rows were read in
  // chemometrics reference pages that print the tables; the rows for derivatives are from memory and were computed
  // again.
  it.each([
    [5, 35, [-3, 12, 17, 12, -3]],
    [7, 21, [-2, 3, 6, 7, 6, 3, -2]],
    [9, 231, [-21, 14, 39, 54, 59, 54, 39, 14, -21]],
    [11, 429, [-36, 9, 44, 69, 84, 89, 84, 69, 44, 9, -36]],
  ])('smoothing over %i even samples', (n, denominator, numerators) => {
    const { value } = quadraticWeights(numerators.map((_, k) => k - (n - 1) / 2))
    numerators.forEach((numerator, k) => expect(value[k]).toBeCloseTo(numerator / denominator, 12))
  })

  it.each([
    [5, 10, [-2, -1, 0, 1, 2]],
    [7, 28, [-3, -2, -1, 0, 1, 2, 3]],
    [9, 60, [-4, -3, -2, -1, 0, 1, 2, 3, 4]],
  ])('slope over %i even samples', (n, denominator, numerators) => {
    const { slope } = quadraticWeights(numerators.map((_, k) => k - (n - 1) / 2))
    numerators.forEach((numerator, k) => expect(slope[k]).toBeCloseTo(numerator / denominator, 12))
  })

  it.each([
    [5, 7, [2, -1, -2, -1, 2]],
    [7, 42, [5, 0, -3, -4, -3, 0, 5]],
  ])('second derivative over %i even samples', (n, denominator, numerators) => {
    const { second } = quadraticWeights(numerators.map((_, k) => k - (n - 1) / 2))
    numerators.forEach((numerator, k) => expect(second[k]).toBeCloseTo(numerator / denominator, 12))
  })

  it('is exact for a parabola on any spacing', () => {
    const steps = fc.array(fc.double({ min: 0.01, max: 1, noNaN: true }), { minLength: 3, maxLength: 20 })
    const factor = fc.double({ min: -50, max: 50, noNaN: true })
    fc.assert(fc.property(steps, factor, factor, factor, fc.nat(19), (parts, c0, c1, c2, at) => {
      const places = parts.map((_, k) => parts.slice(0, k + 1).reduce((sum, part) => sum + part, 0))
      const origin = places[at % places.length]!
      const offsets = places.map(place => place - origin)
      const weights = quadraticWeights(offsets)
      const sum = (w: Float64Array) => offsets.reduce((total, u, k) => total + w[k]! * (c0 + c1 * u + c2 * u * u), 0)
      // Rounding, times the condition of three points as close as 0.01 within 20.
      expect(sum(weights.value)).toBeCloseTo(c0, 5)
      expect(sum(weights.slope)).toBeCloseTo(c1, 5)
      expect(sum(weights.second)).toBeCloseTo(2 * c2, 5)
    }))
  })
})

describe('deriveMotion', () => {
  it('a circle: 25 m/s on 500 m is 1.25 m/s2', () => {
    // OpenStax College Physics, example 6.2: a = v^2 / r = 1.25 m/s2. Smoothing takes (w h)^2 / 10 = 2e-5 at 25 Hz.
    const { timeS, xM, yM } = circle(25, 500, 25, 1)
    const motion = deriveMotion(timeS, xM, yM, null)
    const middle = 250
    expect(motion.speedMps[middle]).toBeCloseTo(25, 2)
    expect(motion.curvature1pm[middle]).toBeCloseTo(1 / 500, 6)
    expect(motion.lateralMps2[middle]).toBeCloseTo(1.25, 3)
    expect(motion.longitudinalMps2[middle]).toBeCloseTo(0, 6)
  })

  it.each([[25, 0.01], [10, 0.01], [1, 0.1]])('at %i Hz a bend of 0.4 rad/s has its lateral acceleration within %f of it', (rateHz, part) => {
    // h is 0.25 s at 25 Hz, 0.2 s at 10 Hz, 1 s at 1 Hz: three times (w h)^2 / 10 for v^2, less the second
    // derivative's.
    for (const turn of [1, -1] as const) {
      const { timeS, xM, yM } = circle(rateHz, 50, 20, turn)
      const motion = deriveMotion(timeS, xM, yM, null)
      const middle = Math.floor(timeS.length / 2)
      // Positive in a left-hand bend: ISO 8855.
      expect(motion.lateralMps2[middle]! * turn).toBeGreaterThan(8 * (1 - part))
      expect(motion.lateralMps2[middle]! * turn).toBeLessThan(8 * (1 + part))
    }
  })

  it.each([25, 10, 1])('steady braking on a straight is exact at %i Hz, on uneven samples too', (rateHz) => {
    const timeS = times(0, 4, rateHz).map((t, k) => t + 0.2 / rateHz * Math.sin(k))
    const xM = timeS.map(t => (50 * t - 4 * t * t) * 0.6)
    const yM = timeS.map(t => (50 * t - 4 * t * t) * 0.8)
    const motion = deriveMotion(timeS, xM, yM, null)
    timeS.forEach((t, i) => {
      // Rounding only, ends included.
      expect(motion.speedMps[i]).toBeCloseTo(50 - 8 * t, 8)
      expect(motion.longitudinalMps2[i]).toBeCloseTo(-8, 6)
      expect(motion.lateralMps2[i]).toBeCloseTo(0, 6)
    })
  })

  it('takes logged speed as it is', () => {
    const { timeS, xM, yM } = circle(10, 100, 20, 1)
    const logged = timeS.map(t => 20.5 + 2 * t)
    const motion = deriveMotion(timeS, xM, yM, logged)
    expect(Array.from(motion.speedMps)).toEqual(logged)
    expect(motion.longitudinalMps2[100]).toBeCloseTo(2, 9)
    // v^2 / R with the logged speed.
    expect(motion.lateralMps2[100]! / (logged[100]! ** 2 / 100)).toBeCloseTo(1, 2)
  })

  it('a standing car has no curvature and no lateral acceleration', () => {
    const timeS = times(0, 2, 25)
    const xM = timeS.map((_, k) => 0.01 * Math.sin(k * 12.9898))
    const yM = timeS.map((_, k) => 0.01 * Math.cos(k * 78.233))
    const motion = deriveMotion(timeS, xM, yM, null)
    expect(motion.curvature1pm.every(Number.isNaN)).toBe(true)
    expect(motion.lateralMps2.every(value => value === 0)).toBe(true)
  })

  it('leaves a missing position missing, and two samples without an answer', () => {
    const { timeS, xM, yM } = circle(10, 100, 20, 1)
    const holed = xM.map((x, i) => i === 50 ? Number.NaN : x)
    const motion = deriveMotion(timeS, holed, yM, null)
    expect(motion.speedMps[50]).toBeNaN()
    expect(motion.speedMps[51]).toBeCloseTo(20, 1)
    expect(deriveMotion([0, 1], [0, 1], [0, 0], null).speedMps.every(Number.isNaN)).toBe(true)
    expect(deriveMotion([], [], [], null).speedMps.length).toBe(0)
  })

  it('refuses columns of different length', () => {
    expect(() => deriveMotion([0, 1, 2], [0, 1], [0, 1, 2], null)).toThrow(expect.objectContaining({ code: 'length_mismatch' }))
  })
})
