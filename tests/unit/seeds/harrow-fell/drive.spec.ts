import { describe, expect, it, vi } from 'vitest'
import geodesic from 'geographiclib-geodesic'
import { CAR, GRAVITY_MPS2 } from '../../../../seeds/harrow-fell/car'
import { drivePlanned } from '../../../../seeds/harrow-fell/demo-logs'
import { driveOuting, nodeTimes, type DrivenOuting } from '../../../../seeds/harrow-fell/drive'
import { pathAt } from '../../../../seeds/harrow-fell/path'
import { PLAN } from '../../../../seeds/harrow-fell/plan'
import { makeRandom } from '../../../../seeds/harrow-fell/random'
import { makeTrack } from '../../../../seeds/harrow-fell/track'
import { stateAt, timeAtStation } from '../../../../seeds/harrow-fell/trajectory'

// Seconds on a busy machine: whole laps are walked in small steps.
vi.setConfig({ testTimeout: 30_000 })

const track = makeTrack()
const setup = { slow: 1, fast: 1, traction: 1, braking: 1 }
const centre = driveOuting(track, { timedLaps: 1, setup, dayGrip: 1, fuelL: 20, traffic: null, line: 'centre' }, makeRandom(5))
const planned = PLAN.days[0]!.outings[1]!
const outing = drivePlanned(planned)
const startOf = (driven: DrivenOuting, lap: number) => timeAtStation(driven, lap * track.lengthM)
const span = (lap: number) => [startOf(outing, lap), startOf(outing, lap + 1)] as const
const lapTime = (lap: number) => span(lap)[1] - span(lap)[0]
const timed = Array.from({ length: planned.timedLaps }, (_, i) => i + 1)

describe('driveOuting', () => {
  it('drives a lap of the centre line that is as long as the circuit, by geodesics between fixes', () => {
    const [from, to] = [timeAtStation(centre, track.lengthM), timeAtStation(centre, 2 * track.lengthM)]
    const steps = 20_000
    let sum = 0
    let a: ReturnType<typeof track.toDegrees> | undefined
    for (let i = 0; i <= steps; i++) {
      const { eastM, northM } = stateAt(centre, from + (to - from) * i / steps)
      const b = track.toDegrees(eastM, northM)
      sum += a ? geodesic.Geodesic.WGS84.Inverse(a.latitudeDeg, a.longitudeDeg, b.latitudeDeg, b.longitudeDeg).s12! : 0
      a = b
    }
    // Chords of 0.2 m fall short by 0.3 mm in all; the plane's scale within 1.1 km is 1.5e-8 off, 0.05 mm.
    expect(Math.abs(sum - track.lengthM)).toBeLessThan(5e-4)
  })

  it('moves along its path as fast as it says: speed summed over a lap is the length of the driven path', () => {
    const [from, to] = span(3)
    const steps = 40_000
    let sum = 0
    for (let i = 0; i < steps; i++) {
      sum += stateAt(outing, from + (to - from) * (i + 0.5) / steps).speedMps * (to - from) / steps
    }
    let pathM = 0
    for (let i = 0; i < 4 * track.lengthM; i++) {
      pathM += pathAt(track, outing.offset, 3 * track.lengthM + (i + 0.5) / 4).stretch / 4
    }
    // Midpoint rule on both sides, errors of some micrometres.
    expect(Math.abs(sum - pathM)).toBeLessThan(1e-3)
  })

  it('stays within tyres, brakes and power on every timed lap', () => {
    for (let t = span(1)[0]; t < span(timed.length)[1]; t += 0.05) {
      const state = stateAt(outing, t)
      const [ax, ay] = [state.longitudinalMps2 / GRAVITY_MPS2, state.lateralMps2 / GRAVITY_MPS2]
      // Easing the speed over 7 m to either side blunts corners of the ellipse; 6 per cent covers what it can add.
      expect(Math.abs(ay)).toBeLessThan(CAR.grip * 1.06)
      expect(ax).toBeGreaterThan(-1.1)
      const drag = 0.11
      expect(Math.hypot(Math.min(0, ax + drag) / CAR.brake, ay / CAR.grip)).toBeLessThan(1.12)
      expect(state.longitudinalMps2 * state.speedMps * CAR.massKg).toBeLessThan(CAR.wheelPowerW)
    }
  })

  it('looks like a club car: laps near 1:31, braking near 1 g, lateral beyond 1.05 g, 170 to 190 km/h', () => {
    const states = Array.from({ length: 20_000 }, (_, i) => stateAt(outing, span(2)[0] + i * 0.02))
    const most = (pick: (state: (typeof states)[number]) => number) => Math.max(...states.map(pick))
    expect(most(s => -s.longitudinalMps2) / GRAVITY_MPS2).toBeGreaterThan(0.9)
    expect(most(s => Math.abs(s.lateralMps2)) / GRAVITY_MPS2).toBeGreaterThan(1.05)
    expect(most(s => s.speedMps) * 3.6).toBeGreaterThan(170)
    expect(most(s => s.speedMps) * 3.6).toBeLessThan(190)
    for (const lap of timed) {
      expect(lapTime(lap)).toBeGreaterThan(89.5)
      expect(lapTime(lap)).toBeLessThan(93)
    }
  })

  it('loses its first timed lap to cold tyres and the planned one to the slower car', () => {
    const others = timed.filter(lap => lap !== 1 && lap !== planned.traffic!.lap).map(lapTime).sort((a, b) => a - b)
    const median = others[Math.floor(others.length / 2)]!
    expect(lapTime(1)).toBeGreaterThan(median + 0.2)
    expect(lapTime(planned.traffic!.lap)).toBeGreaterThan(median + 0.5)
  })

  it('starts and ends at rest and never stands still in between', () => {
    const rates = outing.stationRateMps
    expect(rates[0]).toBe(0)
    expect(rates[rates.length - 1]).toBe(0)
    expect(rates.slice(1, -1).every(rate => rate > 0)).toBe(true)
  })

  it('uses one pedal at a time', () => {
    expect(outing.throttle.every((value, i) => value === 0 || outing.brakeBar[i] === 0)).toBe(true)
    expect(outing.throttle.some(value => value === 1)).toBe(true)
  })

  it('is faster with each revision of the plan, all else the same, by less than a second a lap', () => {
    const medians = PLAN.setups.map(({ number }) => {
      const driven = drivePlanned({ ...planned, setup: number })
      const times = timed.map(lap => startOf(driven, lap + 1) - startOf(driven, lap))
      return times.sort((a, b) => a - b)[Math.floor(times.length / 2)]!
    })
    expect(medians[1]!).toBeLessThan(medians[0]! - 0.05)
    expect(medians[2]!).toBeLessThan(medians[1]! - 0.02)
    expect(medians[2]!).toBeGreaterThan(medians[0]! - 1)
  })

  it('repeats for a seed and differs for another', () => {
    expect(drivePlanned(planned).timeS).toEqual(outing.timeS)
    expect(drivePlanned({ ...planned, seed: 1 }).timeS).not.toEqual(outing.timeS)
  })
})

describe('nodeTimes', () => {
  it('gives v / a and v2 / 2a for steady braking to rest', () => {
    const [v, a] = [40, 8]
    const metres = v * v / (2 * a)
    const speeds = Float64Array.from({ length: metres + 1 }, (_, s) => Math.sqrt(v * v - 2 * a * s))
    // Sums of a hundred steps round to a few times 1e-15.
    expect(nodeTimes(speeds)[metres]).toBeCloseTo(v / a, 12)
  })
})
