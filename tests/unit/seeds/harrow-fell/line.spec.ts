import { describe, expect, it } from 'vitest'
import { idealLine, outingLine, PIT_OFFSET_M, START_M, STOP_SHORT_M } from '../../../../seeds/harrow-fell/line'
import { pathAt } from '../../../../seeds/harrow-fell/path'
import { makeRandom } from '../../../../seeds/harrow-fell/random'
import { naturalSpline } from '../../../../seeds/harrow-fell/spline'
import { HALF_WIDTH_M, LINE_HALF_WIDTH_M, makeTrack } from '../../../../seeds/harrow-fell/track'

const track = makeTrack()
const laps = 3
const line = outingLine(track, laps, 0.4, makeRandom(4))
const endM = (laps + 2) * track.lengthM - STOP_SHORT_M

describe('idealLine', () => {
  it('bends a good deal less in all than the centre line', () => {
    const closed = idealLine(track)
    const knotM = track.lengthM / closed.length
    const spline = naturalSpline(-10 * knotM, knotM, [...closed.slice(-10), ...closed, ...closed.slice(0, 10)])
    const bending = (at: (s: number) => { curvaturePerM: number, stretch: number }) => {
      const metres = Array.from({ length: track.lengthM }, (_, s) => at(s))
      return metres.reduce((sum, p) => sum + p.curvaturePerM ** 2 * p.stretch, 0)
    }
    const ratio = bending(s => pathAt(track, spline, s)) / bending(s => ({ ...track.at(s), stretch: 1 }))
    expect(ratio).toBeLessThan(0.8)
  })

  it('takes the inside at every apex of a tight corner', () => {
    const closed = idealLine(track)
    for (const { apexM, side, radiusM } of track.corners.filter(corner => corner.radiusM < 80)) {
      const offset = closed[Math.round(apexM * closed.length / track.lengthM)]!
      expect(side === 'left' ? offset : -offset, `radius ${radiusM}`).toBeGreaterThan(1.5)
    }
  })
})

describe('outingLine', () => {
  it('keeps the car on the asphalt between the pit lane and the in lap', () => {
    for (let s = 400; s < (laps + 1) * track.lengthM + 2600; s += 2) {
      // The middle of a car 1.7 m wide, a hand's breadth of paint included.
      expect(Math.abs(line(s).value)).toBeLessThan(HALF_WIDTH_M - 0.85)
    }
  })

  it('begins and ends in the pit lane, clear of the timing line', () => {
    for (const s of [START_M, START_M + 100, endM - 100, endM]) {
      expect(line(s).value).toBeCloseTo(PIT_OFFSET_M, 6)
      expect(Math.abs(line(s).value)).toBeGreaterThan(LINE_HALF_WIDTH_M)
    }
  })

  it('differs from lap to lap by decimetres', () => {
    const stations = Array.from({ length: 150 }, (_, i) => 5000 + 16 * i)
    const differences = stations.map(s => line(s).value - line(s + track.lengthM).value)
    const sd = Math.sqrt(differences.reduce((sum, d) => sum + d * d, 0) / differences.length)
    expect(sd).toBeGreaterThan(0.15)
    expect(sd).toBeLessThan(1)
  })
})
