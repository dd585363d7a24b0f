import { describe, expect, it, vi } from 'vitest'
import { driveOuting } from '../../../../seeds/harrow-fell/drive'
import { LOG_HEADER, USUAL_LOG, writeLog } from '../../../../seeds/harrow-fell/log'
import { makeRandom } from '../../../../seeds/harrow-fell/random'
import { makeTrack } from '../../../../seeds/harrow-fell/track'
import { stateAt } from '../../../../seeds/harrow-fell/trajectory'
import { makePlane, toPlane } from '../../../../shared/plane'
import { readCsv } from './read-csv'

// Seconds on a busy machine: whole laps are walked in small steps.
vi.setConfig({ testTimeout: 30_000 })

const track = makeTrack()
const outing = driveOuting(track, {
  timedLaps: 1, setup: { slow: 1, fast: 1, traction: 1, braking: 1 }, dayGrip: 1, fuelL: 20, traffic: null, line: 'driven',
}, makeRandom(3))
const plane = makePlane(54.402, -2.913)
const exact = writeLog(outing, { ...USUAL_LOG, noise: 'off' }, makeRandom(1))
const noisy = writeLog(outing, USUAL_LOG, makeRandom(1))

describe('writeLog', () => {
  it('writes a header and rows of the same width at the rate asked for', () => {
    const lines = exact.csv.trimEnd().split('\n')
    expect(lines[0]).toBe(LOG_HEADER)
    expect(lines).toHaveLength(exact.rows + 1)
    expect(new Set(lines.map(line => line.split(',').length))).toEqual(new Set([15]))
    expect(lines.slice(1, 4).map(line => line.split(',')[0])).toEqual(['0.000', '0.040', '0.080'])
    const slow = writeLog(outing, { ...USUAL_LOG, rateHz: 10 }, makeRandom(1))
    expect(slow.rows / exact.rows).toBeCloseTo(0.4, 3)
  })

  it('holds the motion itself without noise: a micrometre, a micrometre a second', () => {
    const { latitude, longitude, speed_kmh: speed, time_s: time } = readCsv(exact.csv)
    const { xM, yM } = toPlane(plane, latitude!, longitude!)
    for (let i = 0; i < exact.rows; i += 7) {
      const state = stateAt(outing, time![i]! - USUAL_LOG.standS)
      // Half of 1e-11 degrees is 0.6 um; two roundings and the plane's own nanometres.
      expect(Math.hypot(xM[i]! - state.eastM, yM[i]! - state.northM)).toBeLessThan(2e-6)
      expect(Math.abs(speed![i]! / 3.6 - state.speedMps)).toBeLessThan(2e-7)
    }
  })

  it('adds noise of the size asked for, and leaves the truth alone', () => {
    expect(noisy.truth).toEqual(exact.truth)
    const clean = readCsv(exact.csv)
    const dirty = readCsv(noisy.csv)
    const spread = (values: number[]) => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length)
    // A degree of latitude is 111.3 km at this latitude.
    const offM = dirty.latitude!.map((value, i) => (value - clean.latitude![i]!) * 111_300)
    const steps = offM.slice(1).map((value, i) => value - offM[i]!)
    const noise = USUAL_LOG.noise as Exclude<typeof USUAL_LOG.noise, 'off'>
    // A step is the difference of two white draws, plus a little drift: sqrt(2) of one, within 10 per cent.
    expect(spread(steps) / (noise.positionM * Math.SQRT2)).toBeGreaterThan(0.9)
    expect(spread(steps) / (noise.positionM * Math.SQRT2)).toBeLessThan(1.15)
    const moving = dirty.speed_kmh!.map((value, i) => (value - clean.speed_kmh![i]!) / 3.6)
      .filter((_, i) => clean.speed_kmh![i]! > 20)
    expect(spread(moving) / noise.speedMps).toBeCloseTo(1, 1)
    const shaking = dirty.acc_lat_g!.map((value, i) => value - clean.acc_lat_g![i]!)
    expect(spread(shaking)).toBeGreaterThan(0.005)
    expect(spread(shaking)).toBeLessThan(0.05)
  })

  it('signs its accelerations by ISO 8855: braking negative, left-hand bends positive', () => {
    const { acc_lat_g: lateral, acc_long_g: longitudinal, time_s: time, brake_bar: brake } = readCsv(exact.csv)
    const lap = exact.truth[1]!
    const near = (apexM: number) => time!.findIndex((t) => {
      return t >= lap.startS && stateAt(outing, t - USUAL_LOG.standS).stationM >= track.lengthM + apexM
    })
    for (const { apexM, side } of track.corners.filter(corner => corner.radiusM < 80)) {
      expect(lateral![near(apexM)]! * (side === 'left' ? 1 : -1)).toBeGreaterThan(0.5)
    }
    brake!.forEach((bar, i) => expect(bar < 10 || longitudinal![i]! < 0).toBe(true))
  })

  it('writes no negative zero', () => {
    expect(noisy.csv).not.toMatch(/(^|,)-0(\.0+)?(,|$)/m)
  })
})
