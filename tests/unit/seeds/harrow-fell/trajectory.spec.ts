import { describe, expect, it } from 'vitest'
import { drivePlanned } from '../../../../seeds/harrow-fell/demo-logs'
import { nodeTimes, type DrivenOuting } from '../../../../seeds/harrow-fell/drive'
import { PLAN } from '../../../../seeds/harrow-fell/plan'
import { naturalSpline } from '../../../../seeds/harrow-fell/spline'
import { makeTrack } from '../../../../seeds/harrow-fell/track'
import { drivingTimeS, stateAt, timeAtStation } from '../../../../seeds/harrow-fell/trajectory'

const track = makeTrack()
const outing = drivePlanned(PLAN.days[1]!.outings[2]!)

/** Steady braking from 40 m/s at 8 m/s2 down the finish straight, which takes 100 m and 5 s. */
function steadyBraking(): DrivenOuting {
  const stationRateMps = Float64Array.from({ length: 101 }, (_, s) => Math.sqrt(1600 - 16 * s))
  const zeros = new Float64Array(101)
  return {
    track,
    timedLaps: 0,
    offset: naturalSpline(0, 1, [0, 0, 0]),
    fromM: 0,
    stationRateMps,
    timeS: nodeTimes(stationRateMps),
    speedMps: stationRateMps,
    accelMps2: zeros.map(() => -8),
    throttle: zeros,
    brakeBar: zeros,
    gear: new Uint8Array(101),
  }
}

describe('stateAt', () => {
  it('brakes as the textbook says: v0 t - a t2 / 2 after t, v2 / 2a to rest', () => {
    const braking = steadyBraking()
    for (const t of [0, 0.013, 0.5, 1.777, 3.2, 4.99]) {
      const state = stateAt(braking, t)
      const p = track.at(0)
      // Rounding of a hundred sums.
      expect(Math.hypot(state.eastM - p.eastM, state.northM - p.northM)).toBeCloseTo(40 * t - 4 * t * t, 9)
      if (t > 0) {
        expect(state.speedMps).toBeCloseTo(40 - 8 * t, 9)
      }
    }
    const end = stateAt(braking, 100)
    expect(end.stationM).toBeCloseTo(40 * 40 / (2 * 8), 9)
    expect(end.speedMps).toBe(0)
  })

  it('has the speed and acceleration of its own positions', () => {
    const h = 1e-3
    for (let t = 30; t < 120; t += 0.37) {
      const [a, m, b] = [t - h, t, t + h].map(at => stateAt(outing, at))
      const speed = Math.hypot(b!.eastM - a!.eastM, b!.northM - a!.northM) / (2 * h)
      // A step of acceleration at a node, at most a few m/s2, moves the central difference by a h / 4.
      expect(Math.abs(m!.speedMps - speed)).toBeLessThan(3e-3)
      // The logged acceleration is the mean over neighbouring metres; jerk in braking is up to 100 m/s3 over 0.05 s.
      expect(Math.abs(m!.longitudinalMps2 - (b!.speedMps - a!.speedMps) / (2 * h))).toBeLessThan(2.5)
    }
  })

  it('adds up: acceleration over the braking for corner 1 is the speed that was lost', () => {
    const [from, to] = [timeAtStation(outing, 3 * track.lengthM + 80), timeAtStation(outing, 3 * track.lengthM + 240)]
    const steps = 20_000
    let sum = 0
    for (let i = 0; i < steps; i++) {
      sum += stateAt(outing, from + (to - from) * (i + 0.5) / steps).longitudinalMps2 * (to - from) / steps
    }
    const lost = stateAt(outing, to).speedMps - stateAt(outing, from).speedMps
    expect(lost).toBeLessThan(-15)
    // Node accelerations are means over two metres; the trapezoid through them keeps the sum within a percent.
    expect(Math.abs(sum - lost)).toBeLessThan(0.01 * Math.abs(lost))
  })

  it('stands before the start and after the end', () => {
    const end = drivingTimeS(outing)
    expect(stateAt(outing, -5)).toMatchObject({ speedMps: 0, stationM: outing.fromM })
    expect(stateAt(outing, end + 5)).toMatchObject({ speedMps: 0, stationM: outing.fromM + outing.timeS.length - 1 })
    expect(stateAt(outing, end + 5).eastM).toBe(stateAt(outing, end + 50).eastM)
  })
})

describe('timeAtStation', () => {
  it('is the inverse of the motion', () => {
    for (let s = outing.fromM; s < outing.fromM + outing.timeS.length - 1; s += 41.7) {
      // A nanosecond at walking pace is 1e-9 m; times of 900 s are stored to 1e-13 s.
      expect(stateAt(outing, timeAtStation(outing, s)).stationM).toBeCloseTo(s, 7)
    }
  })

  it('refuses stations outside the outing', () => {
    expect(() => timeAtStation(outing, 0)).toThrow(RangeError)
    expect(() => timeAtStation(outing, 1e6)).toThrow(RangeError)
    expect(() => timeAtStation(outing, Number.NaN)).toThrow(RangeError)
  })
})
