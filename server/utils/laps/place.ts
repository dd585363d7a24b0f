import { LapsError } from './errors'
import { cubicAt, hermite, threePointSlope } from './hermite'
import { indexBefore } from './interpolate'

/** No piece of a path is longer: on a bend of 10 m radius a chord of 2 m is 0.2 % short. */
const PIECE_M = 2
/** No lap is longer; positions that make one so would make points without number. Common practice, no source. */
const LONGEST_LAP_M = 200_000
/** How far around the predecessor's place a foot is looked for. */
const SEARCH_BACK_M = 5
const SEARCH_AHEAD_M = 10
/** Further than this from the reference the car is off the track, and the search widens as it drives on. */
const LOST_M = 25
/**
 * How far ahead it is looked for then, for each metre that it has driven since (a short cut saves no more than this).
 */
const LOST_AHEAD = 3
/** While it is lost it is looked for again each time it has driven this much further, not at every point. */
const LOST_AGAIN = 1.02

/** A lap's way from line to line, in points no more than 2 m apart. */
export interface LapPath {
  /** Strictly rising; the first is the lap's start, the last its end. */
  timeS: Float64Array
  xM: Float64Array
  yM: Float64Array
  /** Distance along the path from its first point. */
  stationM: Float64Array
}

/**
 * The path of one lap by distance. It begins and ends exactly at the lap's instants, on the same cubic Hermite curve on
 * which these were found, so that both ends lie on the start/finish line and the line closes the path; where samples
 * are far apart, points of that curve are put between them.
 *
 * @param timeS strictly rising, length n, seconds; should reach beyond the lap at both ends
 * @param xM length n, metres, no missing values
 * @param yM length n, metres, no missing values
 * @param startS the lap's start on the log's clock
 * @param lapTimeS its duration
 * @throws {LapsError} 'lap_not_covered' where the samples do not reach from its start to its end, 'lap_too_long' where
 *   it is longer than 200 km
 * @see `findCrossings`. O(n + m), m points returned.
 */
export function lapPath(
  timeS: ArrayLike<number>,
  xM: ArrayLike<number>,
  yM: ArrayLike<number>,
  startS: number,
  lapTimeS: number,
): LapPath {
  const n = timeS.length
  const endS = startS + lapTimeS
  if (!(n > 1 && lapTimeS > 0 && timeS[0]! <= startS && timeS[n - 1]! >= endS)) {
    throw new LapsError('lap_not_covered', 'the samples do not cover the whole lap')
  }
  const first = Math.max(0, indexBefore(timeS, startS))
  const fromS = (i: number) => Math.max(timeS[i]!, startS)
  const toS = (i: number) => Math.min(timeS[i + 1]!, endS)
  const chordM = (i: number) =>
    Math.hypot(xM[i + 1]! - xM[i]!, yM[i + 1]! - yM[i]!) * (toS(i) - fromS(i)) / (timeS[i + 1]! - timeS[i]!)
  let chordsM = 0
  for (let i = first; i + 1 < n && timeS[i]! < endS; i++) chordsM += chordM(i)
  refuseTooLong(chordsM)
  const noGaps = new Uint8Array(n)
  const vx = threePointSlope(timeS, xM, noGaps)
  const vy = threePointSlope(timeS, yM, noGaps)
  const t: number[] = []
  const x: number[] = []
  const y: number[] = []
  for (let i = first; i + 1 < n && timeS[i]! < endS; i++) {
    const h = timeS[i + 1]! - timeS[i]!
    const cx = hermite(xM[i]!, vx[i]! * h, xM[i + 1]!, vx[i + 1]! * h)
    const cy = hermite(yM[i]!, vy[i]! * h, yM[i + 1]!, vy[i + 1]! * h)
    const add = (atS: number) => {
      // Rounding can put a lap's instant on a sample: no point twice.
      if (t.length > 0 && atS <= t.at(-1)!) return
      t.push(atS)
      x.push(cubicAt(cx, (atS - timeS[i]!) / h))
      y.push(cubicAt(cy, (atS - timeS[i]!) / h))
    }
    const pieces = Math.ceil(chordM(i) / PIECE_M)
    add(fromS(i))
    for (let k = 1; k < pieces; k++) add(fromS(i) + (toS(i) - fromS(i)) * k / pieces)
    if (toS(i) === endS) add(endS)
  }
  return { timeS: Float64Array.from(t), xM: Float64Array.from(x), yM: Float64Array.from(y), stationM: stations(x, y) }
}

/** Distance along the points from the first of them. */
function stations(x: readonly number[], y: readonly number[]): Float64Array {
  const stationM = new Float64Array(x.length)
  for (let i = 1; i < x.length; i++) stationM[i] = stationM[i - 1]! + Math.hypot(x[i]! - x[i - 1]!, y[i]! - y[i - 1]!)
  // The curve can swing far beyond its chords where samples follow each other very unevenly.
  refuseTooLong(stationM.at(-1)!)
  return stationM
}

function refuseTooLong(lengthM: number): void {
  if (lengthM <= LONGEST_LAP_M) return
  const limit = `A lap is longer than ${LONGEST_LAP_M / 1000} km`
  throw new LapsError('lap_too_long', `${limit}, which no circuit is. Check the positions of the log and where the timing lines lie.`)
}

interface Foot { stationM: number, awayM: number }

/** Foot of the perpendicular from (x, y) on the reference between two stations: its station and how far it is. */
function footWithin(reference: LapPath, x: number, y: number, fromM: number, toM: number): Foot {
  const { xM, yM, stationM } = reference
  let best = Infinity
  let at = fromM
  for (let j = Math.max(0, indexBefore(stationM, fromM)); j + 1 < stationM.length && stationM[j]! <= toM; j++) {
    const dx = xM[j + 1]! - xM[j]!
    const dy = yM[j + 1]! - yM[j]!
    const square = dx * dx + dy * dy
    const u = square > 0 ? Math.min(1, Math.max(0, ((x - xM[j]!) * dx + (y - yM[j]!) * dy) / square)) : 0
    const offX = x - xM[j]! - u * dx
    const offY = y - yM[j]! - u * dy
    const away = offX * offX + offY * offY
    if (away < best) {
      best = away
      at = stationM[j]! + u * (stationM[j + 1]! - stationM[j]!)
    }
  }
  return { stationM: at, awayM: Math.sqrt(best) }
}

/**
 * Station of every point of a lap on the path of another: the foot of its perpendicular, looked for only near its
 * predecessor's (5 m back to 10 m more than the car has driven since), so that a neighbouring straight cannot be
 * mistaken. A car further than 25 m from the reference is off the track: its station stands still, and the search
 * reaches ahead by three times the distance that it has driven since, and is done again each time that has grown by
 * 2 %, so that it finds back. Station never falls: where the foot goes back it stands still too.
 *
 * @param reference path of the lap along which station is measured
 * @param lap       path of the lap to be placed
 * @returns length of `lap`, metres; exactly 0 at its first point and the reference's length at its last. O(n), for a
 *   lost lap O(n log n).
 */
export function placeOnPath(reference: LapPath, lap: LapPath): Float64Array {
  const n = lap.stationM.length
  const lengthM = reference.stationM.at(-1)!
  const stationM = new Float64Array(n)
  let foundM = 0
  let drivenAtFoundM = 0
  let againM = 0
  for (let i = 1; i < n; i++) {
    const drivenM = lap.stationM[i]! - drivenAtFoundM
    stationM[i] = stationM[i - 1]!
    if (drivenM < againM) continue
    const aheadM = drivenM > LOST_M ? LOST_AHEAD * drivenM : drivenM
    const foot = footWithin(reference, lap.xM[i]!, lap.yM[i]!, foundM - SEARCH_BACK_M, foundM + aheadM + SEARCH_AHEAD_M)
    againM = foot.awayM > LOST_M ? drivenM * LOST_AGAIN : 0
    if (foot.awayM > LOST_M) continue
    foundM = foot.stationM
    drivenAtFoundM = lap.stationM[i]!
    stationM[i] = Math.max(stationM[i - 1]!, foot.stationM)
  }
  stationM[n - 1] = lengthM
  return stationM
}
