import { describe, expect, it, vi } from 'vitest'
import { drivePlanned } from '../../../../seeds/harrow-fell/demo-logs'
import { PLAN } from '../../../../seeds/harrow-fell/plan'
import { LINE_HALF_WIDTH_M, SECTOR_STATIONS_M } from '../../../../seeds/harrow-fell/track'
import { drivingTimeS, stateAt } from '../../../../seeds/harrow-fell/trajectory'
import { outingTruth } from '../../../../seeds/harrow-fell/truth'

// Seconds on a busy machine: whole laps are walked in small steps.
vi.setConfig({ testTimeout: 30_000 })

const planned = PLAN.days[1]!.outings[0]!
const outing = drivePlanned(planned)
const standS = 7
const endS = standS + drivingTimeS(outing) + 3
const truth = outingTruth(outing, standS, endS)

/** Crossings of the lines as segments in the plane, by straight lines between positions a millisecond apart. */
function denseCrossings() {
  const lines = [0, ...SECTOR_STATIONS_M].map(s => outing.track.at(s))
  const found: number[][] = lines.map(() => [])
  let a = stateAt(outing, 0)
  for (let ms = 1; ms < drivingTimeS(outing) * 1000; ms++) {
    const b = stateAt(outing, ms / 1000)
    lines.forEach(({ eastM, northM, headingRad }, i) => {
      const [cos, sin] = [Math.cos(headingRad), Math.sin(headingRad)]
      const along = (p: typeof a) => (p.eastM - eastM) * cos + (p.northM - northM) * sin
      const across = (p: typeof a) => (p.northM - northM) * cos - (p.eastM - eastM) * sin
      if (along(a) < 0 && along(b) >= 0 && Math.abs(across(b)) < LINE_HALF_WIDTH_M) {
        found[i]!.push(standS + (ms - 1 + along(a) / (along(a) - along(b))) / 1000)
      }
    })
    a = b
  }
  return found
}

describe('outingTruth', () => {
  it('agrees with a dense search for crossings of the segments, to a microsecond', () => {
    const [startFinish, first, second] = denseCrossings()
    const timed = truth.filter(lap => lap.kind === 'timed')
    // Every lap starts at one crossing, and the last ends at one more: the pit lane passes outside the segment.
    expect(startFinish).toHaveLength(planned.timedLaps + 1)
    timed.forEach((lap, i) => {
      // A straight line over 1 ms at 10 m/s2 errs by 1.3e-6 m, some 3e-8 s.
      expect(Math.abs(lap.startS - startFinish![i]!)).toBeLessThan(1e-6)
      expect(Math.abs(lap.startS + lap.timeS - startFinish![i + 1]!)).toBeLessThan(1e-6)
      expect(Math.abs(lap.startS + lap.sectorsS[0]! - first![i + 1]!)).toBeLessThan(1e-6)
      expect(Math.abs(lap.startS + lap.sectorsS[0]! + lap.sectorsS[1]! - second![i + 1]!)).toBeLessThan(1e-6)
    })
  })

  it('numbers out, timed and in laps without a gap from the first row to the last', () => {
    expect(truth.map(lap => lap.number)).toEqual([...truth.keys()])
    expect(truth.map(lap => lap.kind)).toEqual(['out', ...Array<string>(planned.timedLaps).fill('timed'), 'in'])
    expect(truth[0]!.startS).toBe(0)
    truth.slice(1).forEach((lap, i) => expect(lap.startS).toBeCloseTo(truth[i]!.startS + truth[i]!.timeS, 9))
    const last = truth.at(-1)!
    expect(last.startS + last.timeS).toBeCloseTo(endS, 9)
  })

  it('has sectors that add up to the lap, and none on out and in laps', () => {
    for (const lap of truth) {
      if (lap.kind === 'timed') {
        expect(lap.sectorsS).toHaveLength(3)
        expect(lap.sectorsS.reduce((a, b) => a + b, 0)).toBeCloseTo(lap.timeS, 9)
      }
      else {
        expect(lap.sectorsS).toEqual([])
      }
    }
  })

  it('has one braking onset for every corner that needs the brakes, on the way to it', () => {
    for (const lap of truth.filter(candidate => candidate.kind === 'timed')) {
      expect(lap.onsets.map(onset => onset.corner)).toEqual([1, 2, 3, 5, 6, 8, 9, 10, 11])
      for (const { corner, stationM, timeS } of lap.onsets) {
        const { fromM, apexM } = outing.track.corners[corner - 1]!
        expect(stationM).toBeGreaterThan(fromM - 130)
        expect(stationM).toBeLessThan(apexM)
        expect(stateAt(outing, timeS - standS).longitudinalMps2).toBeLessThan(0)
        expect(stateAt(outing, timeS - standS - 0.1).brakeBar).toBe(0)
        expect(stateAt(outing, timeS - standS + 0.2).brakeBar).toBeGreaterThan(5)
      }
    }
  })
})
