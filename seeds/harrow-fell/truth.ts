import type { DrivenOuting } from './drive'
import { SECTOR_STATIONS_M } from './track'
import { timeAtStation } from './trajectory'

export interface BrakingOnset {
  /** Corner that the braking is for. */
  corner: number
  /** Station on the lap, metres. */
  stationM: number
  timeS: number
}

/** A lap as it was really driven; times on the log's own clock, unrounded. */
export interface TrueLap {
  /** 0 for the out lap, 1..n for timed laps, n + 1 for the in lap. */
  number: number
  kind: 'out' | 'timed' | 'in'
  startS: number
  timeS: number
  /** Between the timing lines; empty for out and in laps. */
  sectorsS: number[]
  onsets: BrakingOnset[]
}

/** Line pressure that counts as a foot on the brake, and the peak that makes it a braking. */
const ONSET_BAR = 2
const BRAKING_PEAK_BAR = 10

/**
 * What a perfect timekeeper at the lines would have written down: the instants at which the continuous motion passes
 * the stations of the timing lines, which stand square to the centre line there.
 * @param standS seconds that the logger ran before the car moved
 * @param endS   last instant of the log
 */
export function outingTruth(outing: DrivenOuting, standS: number, endS: number): TrueLap[] {
  const { track, timedLaps } = outing
  const at = (stationM: number) => standS + timeAtStation(outing, stationM)
  const onsets = brakingOnsets(outing, standS)
  return Array.from({ length: timedLaps + 2 }, (_, number) => {
    const base = number * track.lengthM
    const timed = number > 0 && number <= timedLaps
    const startS = number === 0 ? 0 : at(base)
    const finishS = number > timedLaps ? endS : at(base + track.lengthM)
    const instants = [startS, ...SECTOR_STATIONS_M.map(stationM => at(base + stationM)), finishS]
    return {
      number,
      kind: timed ? 'timed' : number === 0 ? 'out' : 'in',
      startS,
      timeS: finishS - startS,
      sectorsS: timed ? instants.slice(1).map((t, i) => t - instants[i]!) : [],
      onsets: onsets.filter(({ lap }) => lap === number).map(({ lap: _, ...onset }) => onset),
    } satisfies TrueLap
  })
}

function brakingOnsets(outing: DrivenOuting, standS: number) {
  const { brakeBar, fromM, track } = outing
  const found: (BrakingOnset & { lap: number })[] = []
  for (let i = 1; i < brakeBar.length; i++) {
    const [before, now] = [brakeBar[i - 1]!, brakeBar[i]!]
    if (before >= ONSET_BAR || now < ONSET_BAR) {
      continue
    }
    let peak = 0
    for (let j = i; j < brakeBar.length && brakeBar[j]! >= ONSET_BAR; j++) {
      peak = Math.max(peak, brakeBar[j]!)
    }
    if (peak < BRAKING_PEAK_BAR) {
      continue
    }
    const unwrapped = fromM + i - 1 + (ONSET_BAR - before) / (now - before)
    const lap = Math.floor(unwrapped / track.lengthM)
    const stationM = unwrapped - lap * track.lengthM
    const corner = track.corners.find(candidate => stationM < candidate.toM) ?? track.corners[0]!
    found.push({ lap, corner: corner.number, stationM, timeS: standS + timeAtStation(outing, unwrapped) })
  }
  return found
}
