import { readFileSync } from 'node:fs'
import { describe, expect, it, vi } from 'vitest'
import { demoLogs, drivePlanned, type DemoLog } from '../../../../seeds/harrow-fell/demo-logs'
import { makeTrack, timingLine } from '../../../../seeds/harrow-fell/track'
import { timeAtStation } from '../../../../seeds/harrow-fell/trajectory'
import { cutLaps } from '../../../../server/utils/laps/lap'
import { readCsv } from './read-csv'

// Seconds on a busy machine: six outings are driven and written as a whole.
vi.setConfig({ testTimeout: 30_000 })

const { lines } = makeTrack()
const noisy = demoLogs()
const exact = demoLogs({ noise: 'off' })

function cut(log: DemoLog, across = lines) {
  const columns = readCsv(log.csv)
  return cutLaps({
    timeS: Float64Array.from(columns.time_s!),
    latitudeDeg: Float64Array.from(columns.latitude!),
    longitudeDeg: Float64Array.from(columns.longitude!),
    gaps: [],
  }, across, { direction: null })
}

/** Largest difference of lap and of sector times from the truth, over the timed laps of a log, seconds. */
function worst(log: DemoLog): { lapS: number, sectorS: number } {
  const timed = cut(log).laps.filter(lap => lap.kind === 'timed')
  const truth = log.truth.filter(lap => lap.kind === 'timed')
  return {
    lapS: Math.max(...timed.map((lap, i) => Math.abs(lap.timeS - truth[i]!.timeS))),
    sectorS: Math.max(...timed.flatMap((lap, i) => lap.sectorsS.map((s, k) => Math.abs(s! - truth[i]!.sectorsS[k]!)))),
  }
}

describe('demoLogs', () => {
  it('gives six logs at 25 Hz with the laps of the plan, each under 3 MB', () => {
    expect(noisy.map(log => log.truth.filter(lap => lap.kind === 'timed').length)).toEqual([7, 8, 9, 8, 10, 6])
    for (const log of noisy) {
      expect(log.csv.length).toBeLessThan(3e6)
      expect(log.rows).toBe(log.csv.trimEnd().split('\n').length - 1)
    }
  })

  it('shares no log with the fixtures, so that a team with the demo can upload them', () => {
    const fixture = readFileSync(new URL('../../../../fixtures/harrow-fell.csv', import.meta.url), 'utf8')
    expect(noisy.some(log => log.csv === fixture)).toBe(false)
  })

  it('gives the same bytes again', () => {
    demoLogs().forEach((log, i) => expect(log.csv === noisy[i]!.csv).toBe(true))
  })

  it.each(exact.map(log => [log.fileName, log] as const))('%s without noise is cut into its true laps and sectors within 1 ms', (_, log) => {
    const { laps, lines: counts, warnings } = cut(log)
    expect(warnings).toEqual([])
    expect(laps.map(lap => [lap.number, lap.kind, lap.flags])).toEqual(log.truth.map(lap => [lap.number, lap.kind, []]))
    expect(counts.map(line => line.ignored)).toEqual([0, 0, 0])
    laps.forEach((lap, i) => {
      const truth = log.truth[i]!
      // The product's promise; what is left is the cubic between samples 40 ms apart.
      expect(Math.abs(lap.startS - truth.startS)).toBeLessThan(1e-3)
      expect(Math.abs(lap.timeS - truth.timeS)).toBeLessThan(1e-3)
      expect(lap.sectorsS).toHaveLength(truth.sectorsS.length)
      lap.sectorsS.forEach((sectorS, k) => expect(Math.abs(sectorS! - truth.sectorsS[k]!)).toBeLessThan(1e-3))
    })
  })

  it.each(noisy.map(log => [log.fileName, log] as const))('%s as logged is cut into the same laps, within what its noise allows', (_, log) => {
    expect(cut(log).laps.map(lap => lap.kind)).toEqual(log.truth.map(lap => lap.kind))
    // Drift of 0.4 m (standard deviation) at both ends of a lap, at 45 m/s over the line, hardly correlated after 90 s:
    // 0.4 sqrt(2) / 45 = 13 ms, at the slower sector lines 20 ms; four times that for the worst of some fifty laps.
    // It must not be exact either, or the noise is lost.
    const { lapS, sectorS } = worst(log)
    expect(lapS).toBeLessThan(0.055)
    expect(sectorS).toBeLessThan(0.08)
    expect(lapS).toBeGreaterThan(1e-3)
  })
})

describe('cutLaps on the simulated motion', () => {
  it('times lines in the middle of braking, at an apex and in a flat bend within 1 ms too', () => {
    const track = makeTrack()
    const log = exact[4]!
    const outing = drivePlanned(log.outing)
    const stations = [150, 890, 1440]
    const placed = stations.map((stationM, i) => timingLine(track.at(stationM), track.toDegrees, i + 1))
    const { laps } = cut(log, [lines[0]!, ...placed])
    const timed = laps.filter(lap => lap.kind === 'timed')
    expect(timed).toHaveLength(log.outing.timedLaps)
    for (const lap of timed) {
      const instants = [0, ...stations].map(stationM => timeAtStation(outing, lap.number * track.lengthM + stationM))
      stations.forEach((_, k) => {
        const trueS = instants[k + 1]! - instants[k]!
        expect(Math.abs(lap.sectorsS[k]! - trueS)).toBeLessThan(1e-3)
      })
    }
  })
})
