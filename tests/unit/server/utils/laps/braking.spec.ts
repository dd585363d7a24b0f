import { describe, expect, it } from 'vitest'
import { findBrakings } from '../../../../../server/utils/laps/braking'
import { times } from '../../../../support/synthetic-track'

const G = 9.80665

/** A deceleration by time, driven from a speed; station and speed by fine integration of its own. */
function run(rateHz: number, decel: (t: number) => number, seconds = 12, v0 = 60) {
  const timeS = times(0, seconds, rateHz)
  const speedMps: number[] = []
  const stationM: number[] = []
  let v = v0
  let s = 0
  let at = 0
  const step = 1e-3
  for (const t of timeS) {
    for (; at < t - step / 2; at += step) {
      const a = decel(at + step / 2)
      s += v * step - a * step * step / 2
      v -= a * step
    }
    speedMps.push(v)
    stationM.push(s)
  }
  return { timeS, speedMps, stationM, a: timeS.map(t => -decel(t)) }
}

/** Ramps up from t0 within `up`, holds, ramps down within `down` until t1. */
function trapezoid(t: number, t0: number, t1: number, peak: number, up: number, down: number): number {
  return Math.max(0, Math.min(1, (t - t0) / up, (t1 - t) / down)) * peak
}

function find({ stationM, timeS, speedMps, a }: ReturnType<typeof run>) {
  return findBrakings(stationM, timeS, speedMps, a)
}

describe('findBrakings', () => {
  it.each([[100, 0.005], [25, 0.01], [10, 0.03]])('a straight ramp begins where 15 percent of it is reached: at %i Hz within %f s', (rateHz, toleranceS) => {
    // Ramp of 0.5 s from t = 3: 15 % at 3.075 s. Up to 70 % the running mean of 0.2 s stays on the ramp; interpolation
    // between samples of a straight ramp is exact but for the corner of the ramp.
    const log = run(rateHz, t => trapezoid(t, 3, 7, 9, 0.5, 1))
    const [braking, ...more] = find(log)
    expect(more).toEqual([])
    expect(Math.abs(braking!.onsetTimeS - 3.075)).toBeLessThan(toleranceS)
    expect(Math.abs(braking!.onsetStationM - 180 - 0.075 * 60)).toBeLessThan(toleranceS * 60 + 0.05)
    expect(braking!.onsetSpeedMps).toBeCloseTo(60, 0)
    expect(braking!.peakMps2).toBeCloseTo(9, 6)
    // Down from 6 to 7 s: 15 % at 6.85 s.
    expect(Math.abs(braking!.releaseTimeS - 6.85)).toBeLessThan(toleranceS)
    const i = log.timeS.findIndex(t => t >= braking!.releaseTimeS)
    expect(braking!.releaseStationM).toBeLessThanOrEqual(log.stationM[i]!)
    expect(braking!.releaseStationM).toBeGreaterThanOrEqual(log.stationM[i - 1]!)
  })

  it('is not moved by lifting the throttle a second earlier', () => {
    const ramp = (t: number) => trapezoid(t, 3, 7, 9, 0.5, 1)
    // 0.15 g of drag and engine from 2 s: a threshold of 0.1 g would call that braking.
    const [braking] = find(run(25, t => t > 2 && t < 7 ? Math.max(1.5, ramp(t)) : 0))
    expect(braking!.onsetTimeS).toBeCloseTo(3.075, 1)
  })

  it('holds against 0.15 g of shaking at 25 Hz', () => {
    const clean = run(25, t => trapezoid(t, 3, 7, 9, 0.5, 1))
    const a = clean.a.map((value, k) => value + 0.15 * G * Math.sin(k * 2.399))
    const brakings = find({ ...clean, a })
    expect(brakings).toHaveLength(1)
    // 0.15 g against a ramp of 1.8 g a second, after a mean of five samples.
    expect(Math.abs(brakings[0]!.onsetTimeS - 3.075)).toBeLessThan(0.1)
  })

  it('two brakings a second apart are two, a pause of 0.2 s parts none', () => {
    const each = (t: number, from: number) => trapezoid(t, from, from + 2, 8, 0.2, 0.2)
    const two = (pause: number) => run(25, t => each(t, 2) + each(t, 4 + pause))
    expect(find(two(1))).toHaveLength(2)
    expect(find(two(0.1))).toHaveLength(1)
  })

  it('lifting, a dab of 0.2 s and a missing channel are none', () => {
    expect(find(run(25, t => trapezoid(t, 2, 5, 0.25 * G, 0.2, 0.2)))).toEqual([])
    expect(find(run(25, t => trapezoid(t, 2, 2.2, 6, 0.02, 0.02)))).toEqual([])
    const log = run(25, t => trapezoid(t, 3, 7, 9, 0.5, 1))
    expect(find({ ...log, a: log.a.map(() => Number.NaN) })).toEqual([])
    expect(findBrakings([], [], [], [])).toEqual([])
  })

  it('a lap that begins or ends in the middle of braking', () => {
    const brakings = find(run(25, t => trapezoid(t, -2, 1, 8, 0.5, 0.5) + trapezoid(t, 3.9, 9, 8, 0.5, 0.5), 6))
    expect(brakings).toHaveLength(2)
    expect(brakings[0]).toMatchObject({ onsetTimeS: 0, onsetStationM: 0 })
    expect(brakings[1]!.releaseTimeS).toBe(6)
  })

  it('passes over single missing samples', () => {
    const log = run(25, t => trapezoid(t, 3, 7, 9, 0.5, 1))
    const [braking] = find({ ...log, a: log.a.map((value, k) => k % 5 === 2 ? Number.NaN : value) })
    expect(braking!.onsetTimeS).toBeCloseTo(3.075, 1)
  })

  it('refuses columns of different length', () => {
    expect(() => findBrakings([0], [0, 1], [0, 1], [0, 1])).toThrow(expect.objectContaining({ code: 'length_mismatch' }))
  })
})
