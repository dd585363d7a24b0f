import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compareLaps } from '../../../../../server/utils/laps/compare'
import type { LapTrace } from '../../../../../server/utils/laps/compare'
import { asLog, drive, oval, pointAt, times } from '../../../../support/synthetic-track'

const OVAL = oval(400, 60)
const L = OVAL.lengthM

/** Full braking on the northern straight (station 388 to 788), from a given station on. */
function lively(brakeAtM: number, decel = 8) {
  const slowM = 90
  const speedUpM = 2 * slowM
  return drive([
    { lengthM: brakeAtM, accelMps2: 0 },
    { lengthM: slowM, accelMps2: -decel },
    { lengthM: speedUpM, accelMps2: decel / 2 },
    { lengthM: L - brakeAtM - slowM - speedUpM, accelMps2: 0 },
  ], 45)
}

type Drive = ReturnType<typeof drive>
/** Channels by time and station. */
type Logged = (t: number, s: number) => Record<string, number>

/** The lap that begins at station 0, with two seconds to either side. */
function trace(by: Drive, rateHz: number, asideM = 0, startS = 2, channels: Logged = () => ({})): LapTrace {
  const timeS = times(startS - 2, startS + by.lapTimeS + 2, rateHz)
  const onLap = (t: number) => t - startS
  const log = asLog(timeS, timeS.map((t) => {
    const { x, y, headingRad } = pointAt(OVAL, by.stationAt(onLap(t)))
    return { x: x + asideM * Math.sin(headingRad), y: y - asideM * Math.cos(headingRad) }
  }))
  const rows = timeS.map(t => channels(t, by.stationAt(onLap(t))))
  const names = Object.keys(rows[0]!)
  return {
    timeS: log.timeS, latitudeDeg: log.latitudeDeg, longitudeDeg: log.longitudeDeg,
    channels: Object.fromEntries(names.map(name => [name, Float32Array.from(rows, row => row[name]!)])),
    startS, lapTimeS: by.lapTimeS,
  }
}

const EARLY = lively(420)
/** Brakes 30 m later and a little less, and so is the faster. */
const LATE = lively(450, 7.5)
const STEP = { stepM: 2 }

describe('compareLaps', () => {
  it('resamples on a common grid that ends at the length exactly', () => {
    const { stationM, lengthM, a, b, differenceS } = compareLaps(trace(EARLY, 25), trace(LATE, 25), STEP)
    expect(lengthM).toBeCloseTo(L, 1)
    expect(stationM[1]).toBe(2)
    expect(stationM.at(-1)).toBe(lengthM)
    const drawn = [a.elapsedS, a.speedMps, a.longitudinalMps2, a.lateralMps2, a.xM, a.yM]
    for (const values of [differenceS, ...drawn, b.elapsedS]) {
      expect(values).toHaveLength(stationM.length)
      expect(values.every(Number.isFinite)).toBe(true)
    }
  })

  it.each([[25, 0.002], [10, 0.01], [1, 0.15]])('the difference at every station is that of closed form, at %i Hz within %f s', (rateHz, toleranceS) => {
    // Two laps on one line. Station: 0.02 m of 1177 (chords). Where braking sets in the path between samples is off
    // by a h^2 / 16 and at 1 Hz bends are cut by decimetres: at 27 m/s and less some hundredths.
    const { stationM, lengthM, differenceS } = compareLaps(trace(EARLY, rateHz), trace(LATE, rateHz), STEP)
    stationM.forEach((s, k) => {
      const truth = EARLY.timeAt(s * L / lengthM * (1 - 1e-12)) - LATE.timeAt(s * L / lengthM * (1 - 1e-12))
      expect(Math.abs(differenceS[k]! - truth)).toBeLessThan(toleranceS)
    })
  })

  it('speed and accelerations are those of closed form', () => {
    const { stationM, a } = compareLaps(trace(EARLY, 25), trace(EARLY, 25), STEP)
    stationM.forEach((s, k) => {
      const t = EARLY.timeAt(Math.min(s, L - 1e-6))
      // The window of 0.25 s rounds the edges of braking (at most a h / 4) and bends; the mean over it is exact
      // elsewhere.
      expect(Math.abs(a.speedMps[k]! - EARLY.speedAt(t))).toBeLessThan(0.6)
    })
    const at = (s: number) => Math.round(s / 2)
    expect(a.longitudinalMps2[at(465)]).toBeCloseTo(-8, 2)
    expect(a.lateralMps2[at(300)]! / (45 ** 2 / 60)).toBeCloseTo(1, 1)
    // Left-hand bends: positive.
    expect(a.lateralMps2[at(300)]).toBeGreaterThan(0)
    expect(a.source).toEqual({ speed: 'derived', longitudinal: 'derived', lateral: 'derived' })
  })

  it('takes logged channels where they are, and says so', () => {
    const logged = trace(EARLY, 10, 0, 2, (t, s) => (
      { speed: 33 + s / 1000, lateral_acceleration: 7, longitudinal_acceleration: Number.NaN }))
    const { stationM, a } = compareLaps(logged, trace(LATE, 10), STEP)
    expect(a.source).toEqual({ speed: 'logged', longitudinal: 'derived', lateral: 'logged' })
    // float32 of about 34: 2e-6; between samples 4.5 m apart where braking sets in: microns per second.
    stationM.forEach((s, k) => expect(a.speedMps[k]).toBeCloseTo(33 + s / 1000, 2))
    expect(a.lateralMps2.every(value => value === 7)).toBe(true)
    // dv/dt = v ds/1000: 45 / 1000 where the car drives 45 m/s.
    expect(a.longitudinalMps2[50]).toBeCloseTo(0.045, 3)
  })

  it('leaves a hole of a logged channel a hole', () => {
    const logged = trace(EARLY, 10, 0, 2, (t, s) => ({ speed: s > 600 && s < 700 ? Number.NaN : 30 }))
    const { stationM, a } = compareLaps(logged, trace(LATE, 10), STEP)
    stationM.forEach((s, k) => {
      if (s > 605 && s < 695) expect(a.speedMps[k]).toBeNaN()
      if (s < 590 || s > 710) expect(a.speedMps[k]).toBe(30)
    })
  })

  it('finds the brakings of both laps', () => {
    const { a, b } = compareLaps(trace(EARLY, 25), trace(LATE, 25), STEP)
    expect([a.brakings.length, b.brakings.length]).toEqual([1, 1])
    // A step of deceleration, smoothed over +-0.25 s twice and 0.1 s once: within a fifth of a second at 45 m/s, and
    // alike.
    expect(Math.abs(a.brakings[0]!.onsetStationM - 420)).toBeLessThan(9)
    expect(b.brakings[0]!.onsetStationM - a.brakings[0]!.onsetStationM).toBeCloseTo(30, 0)
    expect(a.brakings[0]!.peakMps2).toBeCloseTo(8, 0)
    expect(a.brakings[0]!.onsetTimeS).toBeCloseTo(EARLY.timeAt(a.brakings[0]!.onsetStationM), 2)
  })

  it('station is the same place for a car 5 m outside', () => {
    // Speed as logged: that of the outer way would fall at once where a bend ends.
    const speed = (t: number) => ({ speed: EARLY.speedAt(t - 2) })
    const outside = compareLaps(trace(EARLY, 25, 5, 2, speed), trace(LATE, 25), STEP)
    const inside = compareLaps(trace(EARLY, 25, 0, 2, speed), trace(LATE, 25), STEP)
    expect(outside.reference).toBe('b')
    expect(outside.lengthM).toBe(inside.lengthM)
    expect(outside.a.brakings[0]!.onsetStationM).toBeCloseTo(inside.a.brakings[0]!.onsetStationM, 0)
    // Its own way is drawn 5 m to the right of the other's.
    const { a, b } = outside
    outside.stationM.forEach((_, k) => expect(Math.hypot(a.xM[k]! - b.xM[k]!, a.yM[k]! - b.yM[k]!)).toBeCloseTo(5, 0))
  })

  it('refuses a step of nothing, a lap without positions and one that is not covered', () => {
    const lap = trace(EARLY, 10)
    expect(() => compareLaps(lap, lap, { stepM: 0 })).toThrow(expect.objectContaining({ code: 'bad_step' }))
    const blind = { ...lap, latitudeDeg: Float64Array.from(lap.latitudeDeg, () => Number.NaN) }
    expect(() => compareLaps(blind, blind, STEP)).toThrow(expect.objectContaining({ code: 'no_position' }))
    expect(() => compareLaps({ ...lap, startS: 10 }, lap, STEP)).toThrow(expect.objectContaining({ code: 'lap_not_covered' }))
  })
})

describe('what holds for any two laps', () => {
  const between = (min: number, max: number) => fc.double({ min, max, noNaN: true })
  const anyLap = fc.record({
    brakeAtM: between(390, 480),
    decel: between(2, 9),
    rateHz: fc.constantFrom(1, 5, 10, 25),
    asideM: between(-6, 6),
    startS: between(2, 2000),
  }).map(({ brakeAtM, decel, rateHz, asideM, startS }) => trace(lively(brakeAtM, decel), rateHz, asideM, startS))
  const step = fc.double({ min: 0.5, max: 25, noNaN: true })

  it('a lap against itself differs nowhere', () => {
    fc.assert(fc.property(anyLap, step, (lap, stepM) => {
      expect(compareLaps(lap, lap, { stepM }).differenceS.every(difference => difference === 0)).toBe(true)
    }), { numRuns: 15 })
  }, 60_000)

  it('the difference begins at nothing and ends at that of the lap times, exactly; times rise', () => {
    fc.assert(fc.property(anyLap, anyLap, step, (a, b, stepM) => {
      const { differenceS, a: lapA, b: lapB, stationM, lengthM } = compareLaps(a, b, { stepM })
      expect(differenceS[0]).toBe(0)
      expect(differenceS.at(-1)).toBe(a.lapTimeS - b.lapTimeS)
      expect(stationM.at(-1)).toBe(lengthM)
      for (let k = 1; k < stationM.length; k++) {
        expect(stationM[k]).toBeGreaterThan(stationM[k - 1]!)
        expect(lapA.elapsedS[k]).toBeGreaterThan(lapA.elapsedS[k - 1]!)
        expect(lapB.elapsedS[k]).toBeGreaterThan(lapB.elapsedS[k - 1]!)
      }
    }), { numRuns: 25 })
  }, 60_000)

  it('swapping the laps flips the sign and nothing else', () => {
    fc.assert(fc.property(anyLap, anyLap, step, (a, b, stepM) => {
      const forth = compareLaps(a, b, { stepM })
      const back = compareLaps(b, a, { stepM })
      expect(back.reference).not.toBe(forth.reference)
      expect(back.stationM).toEqual(forth.stationM)
      expect(back.a).toEqual(forth.b)
      // A difference of nothing has no sign.
      expect(back.differenceS.map(d => -d + 0)).toEqual(forth.differenceS.map(d => d + 0))
    }), { numRuns: 15 })
  }, 60_000)
})
