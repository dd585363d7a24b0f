import { makePlane, toPlane } from '../../../shared/plane'
import type { Plane } from '../../../shared/plane'
import { findCrossings, gapAgrees } from './cross'
import type { PlaneLine } from './cross'
import { startSense } from './direction'
import { LapsError } from './errors'
import { gapAfterSample, threePointSlope } from './hermite'
import type { Gap } from './hermite'
import { indexBefore } from './interpolate'
import { lineReport } from './line-report'
import { countingCrossings, lapDistance, odometer, passings, refuseTooMany, usualSense } from './passes'
import type { LineUse, Pass } from './passes'
import type { CutLap, CutResult, DrivingDirection, TimingLine } from './types'

/** What laps are cut from: the log's own samples of time and place. */
export interface LogPath {
  /** Strictly rising, length n, seconds. */
  timeS: Float64Array
  /** Length n, degrees, NaN = missing. */
  latitudeDeg: Float64Array
  longitudeDeg: Float64Array
  gaps: readonly Gap[]
}

/** A car may have driven this much further in a gap than its edges say. */
const GAP_REACH = 1.5

/** The same in the plane, with velocity and the distance driven. */
interface PlanePath {
  timeS: Float64Array
  xM: Float64Array
  yM: Float64Array
  vxMps: Float64Array
  vyMps: Float64Array
  gapAfter: Uint8Array
  distanceM: Float64Array
}

/** Two ends in an order that does not depend on how the line was drawn. */
function ends(line: TimingLine): [TimingLine['a'], TimingLine['a']] {
  const swap = line.a.latitudeDeg - line.b.latitudeDeg || line.a.longitudeDeg - line.b.longitudeDeg
  return swap > 0 ? [line.b, line.a] : [line.a, line.b]
}

/** The plane at a line's middle. */
function planeAt(line: TimingLine): Plane {
  const [a, b] = ends(line)
  const turn = b.longitudeDeg - a.longitudeDeg
  const shortTurn = turn - 360 * Math.round(turn / 360)
  return makePlane((a.latitudeDeg + b.latitudeDeg) / 2, a.longitudeDeg + shortTurn / 2)
}

/**
 * The log in the plane, without the samples that have no position of their own: missing ones, and those inside a gap.
 */
function pathOf(log: LogPath, plane: Plane): PlanePath {
  const { xM, yM } = toPlane(plane, log.latitudeDeg, log.longitudeDeg)
  const gaps = [...log.gaps].sort((p, q) => p.fromS - q.fromS)
  let kept = 0
  let g = 0
  const timeS = new Float64Array(log.timeS.length)
  for (let i = 0; i < timeS.length; i++) {
    const t = log.timeS[i]!
    while (g < gaps.length && gaps[g]!.toS <= t) g++
    if (Number.isNaN(xM[i]!) || (g < gaps.length && t > gaps[g]!.fromS)) continue
    timeS[kept] = t
    xM[kept] = xM[i]!
    yM[kept] = yM[i]!
    kept++
  }
  if (kept < 2) throw new LapsError('no_position', 'the log has fewer than two positions')
  const path = { timeS: timeS.subarray(0, kept), xM: xM.subarray(0, kept), yM: yM.subarray(0, kept) }
  const gapAfter = gapAfterSample(path.timeS, gaps)
  return {
    ...path,
    vxMps: threePointSlope(path.timeS, path.xM, gapAfter),
    vyMps: threePointSlope(path.timeS, path.yM, gapAfter),
    gapAfter,
    distanceM: odometer(path.xM, path.yM),
  }
}

/** A line in the plane. */
function inPlane(line: TimingLine, plane: Plane): PlaneLine {
  const [a, b] = ends(line)
  const { xM, yM } = toPlane(plane, [a.latitudeDeg, b.latitudeDeg], [a.longitudeDeg, b.longitudeDeg])
  return { ax: xM[0]!, ay: yM[0]!, bx: xM[1]!, by: yM[1]! }
}

/** All crossings of a line, with the distance driven until each. */
function crossingsOf(path: PlanePath, line: PlaneLine): Pass[] {
  const crossings = findCrossings(path.timeS, path.xM, path.yM, path.vxMps, path.vyMps, line, path.gapAfter)
  const passes = crossings.map((crossing) => {
    const i = crossing.sample
    const u = (crossing.timeS - path.timeS[i]!) / (path.timeS[i + 1]! - path.timeS[i]!)
    return { ...crossing, distanceM: path.distanceM[i]! + u * (path.distanceM[i + 1]! - path.distanceM[i]!) }
  })
  refuseTooMany(passes)
  return passes
}

/**
 * Gaps about which speed and heading at both edges say nothing, and which are long enough that the car may have been at
 * the line in between.
 */
function doubtfulGaps({ timeS, xM, yM, vxMps, vyMps, gapAfter }: PlanePath, line: PlaneLine): Gap[] {
  const lineX = (line.ax + line.bx) / 2
  const lineY = (line.ay + line.by) / 2
  const lengthM = Math.hypot(line.bx - line.ax, line.by - line.ay)
  const doubtful: Gap[] = []
  for (let i = 0; i + 1 < timeS.length; i++) {
    if (!gapAfter[i]) continue
    const j = i + 1
    const h = timeS[j]! - timeS[i]!
    const dx = xM[j]! - xM[i]!
    const dy = yM[j]! - yM[i]!
    if (gapAgrees(dx, dy, vxMps[i]! * h, vyMps[i]! * h, vxMps[j]! * h, vyMps[j]! * h)) continue
    const fastestMps = Math.max(Math.hypot(vxMps[i]!, vyMps[i]!), Math.hypot(vxMps[j]!, vyMps[j]!))
    const wayM = Math.max(Math.hypot(dx, dy), h * fastestMps)
    const overLineM = Math.hypot(lineX - xM[i]!, lineY - yM[i]!) + Math.hypot(xM[j]! - lineX, yM[j]! - lineY)
    if (overLineM <= GAP_REACH * wayM + lengthM) doubtful.push({ fromS: timeS[i]!, toS: timeS[j]! })
  }
  return doubtful
}

/** A sector line, in the sense in which it is usually passed; nothing counts in a log that was driven the wrong way. */
function sectorUse(path: PlanePath, line: TimingLine, plane: Plane, counts: boolean, lapM: number): LineUse {
  const drawn = inPlane(line, plane)
  const all = crossingsOf(path, drawn)
  const usual = usualSense(passings(all))
  const ownLapM = Number.isNaN(lapM) ? lapDistance(all.filter(crossing => crossing.sense === usual)) : lapM
  const counting = counts ? countingCrossings(all, usual, ownLapM) : []
  return { line, all, counting, doubtful: doubtfulGaps(path, drawn) }
}

/** A line with the instants of the crossings that count, to look them up. */
interface TimedUse { counting: readonly Pass[], countingS: readonly number[] }

/**
 * Sector times of one lap: each line counts at its first crossing after the one before it, null on both sides of a
 * miss.
 */
function sectorTimes(
  start: Pass,
  end: Pass,
  sectors: readonly TimedUse[],
): { sectorsS: CutLap['sectorsS'], used: Pass[] } {
  const instants: (number | null)[] = [start.timeS]
  const used = [start, end]
  let after = start.timeS
  for (const { counting, countingS } of sectors) {
    const next = counting[indexBefore(countingS, after) + 1]
    const crossing = next && next.timeS < end.timeS ? next : undefined
    instants.push(crossing ? crossing.timeS : null)
    if (!crossing) continue
    used.push(crossing)
    after = crossing.timeS
  }
  instants.push(end.timeS)
  const sectorsS = instants.slice(1).map((to, k) => {
    const from = instants[k]!
    return to === null || from === null ? null : to - from
  })
  return { sectorsS, used }
}

/** Laps between the crossings of the start/finish line, and the rest of the log before and after them. */
function lapsBetween(firstS: number, lastS: number, start: LineUse, sectors: readonly LineUse[]): CutLap[] {
  const starts = start.counting
  const timedSectors = sectors.map(({ counting }) => ({ counting, countingS: counting.map(pass => pass.timeS) }))
  // All are stretches between two neighbouring samples: in this order their ends rise too.
  const doubtful = [start, ...sectors].flatMap(use => use.doubtful).sort((p, q) => p.fromS - q.fromS)
  const doubtfulToS = doubtful.map(gap => gap.toS)
  const laps: CutLap[] = []
  let timed = 0
  const add = (kind: CutLap['kind'], startS: number, endS: number, sectorsS: CutLap['sectorsS'], used: Pass[]) => {
    const gap = doubtful[indexBefore(doubtfulToS, startS) + 1]
    const unsure = used.some(pass => pass.gap !== 'none') || (gap !== undefined && gap.fromS < endS)
    const flags = [...(unsure ? ['gap_at_line'] : []), ...(sectorsS.includes(null) ? ['missed_sector'] : [])]
    const number = { out: 0, timed: timed + 1, in: timed + 1 }[kind]
    if (kind === 'timed') timed++
    laps.push({ number, kind, startS, timeS: endS - startS, sectorsS, flags })
  }
  const first = starts[0]
  const last = starts.at(-1)
  if (!first || !last) {
    add('out', firstS, lastS, [], [])
    return laps
  }
  if (first.timeS > firstS) add('out', firstS, first.timeS, [], [first])
  for (let k = 1; k < starts.length; k++) {
    const from = starts[k - 1]!
    const to = starts[k]!
    const { sectorsS, used } = sectorTimes(from, to, timedSectors)
    add('timed', from.timeS, to.timeS, sectorsS, used)
  }
  if (lastS > last.timeS) add('in', last.timeS, lastS, [], [last])
  return laps
}

/**
 * Cut a log into laps at its timing lines.
 *
 * The plane touches the earth at the middle of the start/finish line. A crossing counts in the sense in which the
 * line is usually passed, or in which loops go the way round that is asked for. Crossing the same place again before
 * a third of a lap (by distance, against the median lap of this log) does not count: the first stands. A line that
 * cuts a second straight counts where the car passes nearest to its middle. How the ends of a line are named changes
 * nothing.
 *
 * Laps follow one another without a hole from the first sample to the last; an out or in lap of no duration is left
 * out. Sector times are differences of unrounded instants and add up to the lap time. A lap is flagged 'gap_at_line'
 * when one of its crossings fell into a gap, or when it holds a gap whose edges disagree in speed or heading and in
 * which the car may have crossed a line (such a crossing is not used), 'missed_sector' when a sector line was not
 * crossed in order.
 *
 * @param log     see LogPath; positions float64 as stored, so that cutting again is equal bit for bit
 * @param lines   one start/finish line and any number of sector lines, in any order
 * @param options the driving direction of the layout, null = as this log was usually driven
 * @returns laps in order of time, line counts in the order of `lines`, warnings as sentences
 * @throws {LapsError} 'no_start_line' | 'line_without_length' | 'length_mismatch' | 'no_position' |
 *   'line_crossed_too_often'
 * @see `findCrossings` for how exact an instant is. O(n x lines).
 */
export function cutLaps(
  log: LogPath,
  lines: readonly TimingLine[],
  options: { direction: DrivingDirection | null },
): CutResult {
  const startLine = lines.find(line => line.kind === 'start_finish')
  if (!startLine) throw new LapsError('no_start_line', 'laps need a start/finish line')
  if (log.timeS.length !== log.latitudeDeg.length) throw new LapsError('length_mismatch', 'time and position differ in length')
  const plane = planeAt(startLine)
  const path = pathOf(log, plane)
  const startInPlane = inPlane(startLine, plane)
  const startCrossings = crossingsOf(path, startInPlane)
  const { sense, lapM } = startSense(startCrossings, path, options.direction)
  const start: LineUse = {
    line: startLine,
    all: startCrossings,
    counting: sense === null ? [] : countingCrossings(startCrossings, sense, lapM),
    doubtful: doubtfulGaps(path, startInPlane),
  }
  const sectors = lines
    .filter(line => line.kind === 'sector')
    .sort((p, q) => p.ordinal - q.ordinal)
    .map(line => sectorUse(path, line, plane, sense !== null, lapM))
  const laps = lapsBetween(log.timeS[0]!, log.timeS.at(-1)!, start, sectors)
  return { laps, ...lineReport(lines, start, sectors, laps, sense === null) }
}
