import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findFixes, findJumps, interpolateFixes, isUsablePosition, longitudeStepDeg } from '../../../../../server/utils/laps/fixes'

const M_PER_DEG = 111_195

/** A car on the meridian at Harrow Fell, its place in metres by row. */
function northbound(metres: readonly number[], rateHz: number, startLongitudeDeg = -2.9) {
  return {
    timeS: Float64Array.from(metres, (_, i) => i / rateHz),
    latitudeDeg: Float64Array.from(metres, m => 54.4 + m / M_PER_DEG),
    longitudeDeg: Float64Array.from(metres, () => startLongitudeDeg),
  }
}

function rising(count: number, stepM: number): number[] {
  return Array.from({ length: count }, (_, i) => i * stepM)
}

function all(count: number): number[] {
  return Array.from({ length: count }, (_, i) => i)
}

describe('isUsablePosition', () => {
  it.each([[54, -3, true], [90, 180, true], [-90, -180, true], [0, 5, true], [5, 0, true], [0, 0, false], [90.1, 0, false], [54, 180.5, false], [Number.NaN, 3, false], [54, Number.NaN, false]])('%d, %d: %s', (latitudeDeg, longitudeDeg, usable) => {
    expect(isUsablePosition(latitudeDeg, longitudeDeg)).toBe(usable)
  })
})

describe('longitudeStepDeg', () => {
  it('goes the short way round', () => {
    expect(longitudeStepDeg(179.5, -179.5)).toBe(1)
    expect(longitudeStepDeg(-179.5, 179.5)).toBe(-1)
    expect(longitudeStepDeg(-3, -2.5)).toBe(0.5)
  })
})

describe('findFixes', () => {
  it('takes a fix for new only when the position changes', () => {
    // A 10 Hz receiver in a 50 Hz file at 30 m/s: every fifth row is new.
    const track = northbound(Array.from({ length: 50 }, (_, i) => Math.floor(i / 5) * 3), 50)
    const { rows, periodS } = findFixes(track, new Float64Array(50).fill(30))
    expect(rows).toEqual([0, 5, 10, 15, 20, 25, 30, 35, 40, 45])
    expect(periodS).toBeCloseTo(0.1, 12)
    expect(findFixes(track, undefined).rows).toEqual(rows)
  })

  it('knows the position of a car that stands, by its speed', () => {
    const track = northbound([0, 0, 0, 0, 2, 4, 6, 6, 6], 10)
    const speed = Float64Array.of(0, 0.1, 0.2, 10, 20, 20, 20, 20, 0)
    expect(findFixes(track, speed).rows).toEqual([0, 1, 2, 4, 5, 6, 8])
  })

  it('knows it without a speed by the distance to the next new fix', () => {
    // Stands 4 s, then creeps 0.5 m: 0.1 m/s on average. Frozen for 1 s while driving 20 m: 20 m/s.
    const standing = northbound([...new Array<number>(40).fill(0), 0.5, 2, 4, 6], 10)
    expect(findFixes(standing, undefined).rows).toEqual(all(44))
    const frozen = northbound([0, 2, 4, ...new Array<number>(9).fill(4), 24, 26], 10)
    expect(findFixes(frozen, undefined).rows).toEqual([0, 1, 2, 12, 13])
  })

  it('drops repeats after the last new fix when nothing tells that the car stands', () => {
    const track = northbound([0, 2, 4, 4, 4], 10)
    expect(findFixes(track, undefined).rows).toEqual([0, 1, 2])
    expect(findFixes(track, Float64Array.of(20, 20, 20, 0, 0)).rows).toEqual(all(5))
  })

  it('passes over rows without a usable position', () => {
    const track = northbound(rising(6, 2), 10)
    track.latitudeDeg[2] = Number.NaN
    track.latitudeDeg[3] = 95
    expect(findFixes(track, undefined).rows).toEqual([0, 1, 4, 5])
    expect(findFixes(northbound([], 10), undefined)).toEqual({ rows: [], periodS: Number.NaN })
  })
})

describe('findJumps', () => {
  it('finds none in driving, however hard', () => {
    // 60 m/s, then braking at 2 g to a stand, 25 Hz.
    const braking = Array.from({ length: 75 }, (_, i) => {
      const brakingS = (i - 10) / 25
      return i < 10 ? i * 2.4 : 24 + brakingS * 60 - 0.5 * 19.6133 * brakingS ** 2
    })
    expect(findJumps(northbound(braking, 25), all(75))).toEqual([])
  })

  it.each([[1, 25], [3, 25], [1, 10], [2, 5]])('finds %d fixes in a row that are 300 m off at %d Hz', (count, rateHz) => {
    const metres = rising(60, 30 / rateHz)
    const track = northbound(metres.map((m, i) => i >= 30 && i < 30 + count ? m + 300 : m), rateHz)
    expect(findJumps(track, all(60))).toEqual(all(count).map(i => 30 + i))
  })

  it('finds a sideways jump, also over the 180th meridian', () => {
    const track = northbound(rising(60, 1.2), 25, 179.9999999)
    track.longitudeDeg[30] = -179.999
    track.longitudeDeg[40] = -179.9999999
    expect(findJumps(track, all(60))).toEqual([30])
  })

  it('finds a wrong first and a wrong last fix', () => {
    const metres = rising(60, 1.2)
    metres[0] = 5000
    metres[59] = -5000
    expect(findJumps(northbound(metres, 25), all(60))).toEqual([0, 59])
  })

  it('keeps a change of place for good', () => {
    const moved = rising(60, 1.2).map((m, i) => i < 30 ? m : m + 40)
    expect(findJumps(northbound(moved, 25), all(60))).toEqual([])
  })

  it('does not take a noisy receiver for a jumping one', () => {
    // White noise with a standard deviation of about 1 m (sum of four uniforms of variance 1/4), far worse than real
    // receivers at 25 Hz, from a fixed seed; one real jump among it.
    let seed = 1
    const uniform = () => (seed = seed * 48_271 % 2_147_483_647) / 2_147_483_647 - 0.5
    const noise = () => Math.sqrt(3) * (uniform() + uniform() + uniform() + uniform())
    const noisy = rising(2000, 1.2).map((m, i) => m + noise() + (i === 1000 ? 200 : 0))
    expect(findJumps(northbound(noisy, 25), all(2000))).toEqual([1000])
  })

  it('does not take coarse positions for jumps', () => {
    // Four decimals of a degree are 11 m; at 25 Hz and 50 m/s the step between two written places would be 278 m/s.
    const track = northbound(rising(200, 2), 25)
    const coarse = { ...track, latitudeDeg: track.latitudeDeg.map(deg => Math.round(deg * 1e4) / 1e4) }
    expect(findJumps(coarse, findFixes(coarse, undefined).rows)).toEqual([])
  })
})

describe('interpolateFixes', () => {
  it('fills straight in time between fixes and nothing outside', () => {
    const track = {
      timeS: Float64Array.of(0, 1, 2, 4, 5),
      latitudeDeg: Float64Array.of(9, 10, 10, 10, 14),
      longitudeDeg: Float64Array.of(9, 20, 20, 20, 28),
    }
    const { latitudeDeg, longitudeDeg } = interpolateFixes(track, [1, 4])
    expect([...latitudeDeg]).toEqual([Number.NaN, 10, 11, 13, 14])
    expect([...longitudeDeg]).toEqual([Number.NaN, 20, 22, 26, 28])
  })

  it('goes the short way over the 180th meridian', () => {
    const track = {
      timeS: Float64Array.of(0, 1, 2, 3, 4),
      latitudeDeg: new Float64Array(5).fill(-17),
      longitudeDeg: Float64Array.of(179.5, 0, 0, 0, -179.5),
    }
    // Quarters of a degree are exact.
    expect([...interpolateFixes(track, [0, 4]).longitudeDeg]).toEqual([179.5, 179.75, 180, -179.75, -179.5])
    const westward = { ...track, longitudeDeg: track.longitudeDeg.toReversed() }
    expect([...interpolateFixes(westward, [0, 4]).longitudeDeg]).toEqual([-179.5, -179.75, -180, 179.75, 179.5])
  })

  it('leaves fixes bit for bit as they are', () => {
    const angle = (limitDeg: number) => fc.double({ min: -limitDeg, max: limitDeg, noNaN: true })
    const anywhere = fc.array(fc.tuple(angle(90), angle(180)), { minLength: 2, maxLength: 20 })
    fc.assert(fc.property(anywhere, (places) => {
      const latitudeDeg = Float64Array.from(places, ([latitude]) => latitude)
      const longitudeDeg = Float64Array.from(places, ([, longitude]) => longitude)
      const timeS = Float64Array.from(places, (_, i) => i)
      const filled = interpolateFixes({ timeS, latitudeDeg, longitudeDeg }, all(places.length))
      expect(filled).toEqual({ latitudeDeg, longitudeDeg })
    }))
  })
})
