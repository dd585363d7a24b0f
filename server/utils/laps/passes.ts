import type { Crossing } from './cross'
import type { Gap } from './hermite'
import type { TimingLine } from './types'
import { LapsError } from './errors'

/** A crossing with the distance driven until then. */
export interface Pass extends Crossing { distanceM: number }

/** A timing line with what the log did there. */
export interface LineUse {
  line: TimingLine
  /** All crossings, in order of time. */
  all: Pass[]
  /** Those that count, in order of time. */
  counting: Pass[]
  /** Gaps in which the car may have crossed it unseen. */
  doubtful: Gap[]
}

/** Crossings of a line further apart than this along it belong to different straights (common practice, no source). */
const SAME_STRAIGHT_M = 15
/** Waiting on the line and rolling back over it: so little driven, and so little moved sideways, between crossings. */
const LINGER_M = 50
const LINGER_ASIDE_M = 6
/** A third of the shortest lap that is taken for one. */
const SHORTEST_THIRD_M = 50
/** Two straights of one lap are less than a lap apart; the rest allows for laps that differ in length. */
const WITHIN_LAP = 0.95
/** Crossings of one line in one log, waiting on it apart: a day of the shortest laps is a quarter of it. */
const MOST_CROSSINGS = 2000
/** Steps shorter than this are a standing car's noise. */
const ODOMETER_STEP_M = 2

/**
 * Distance driven until each sample, metres, in steps of at least 2 m so that a standing car does not gather any.
 * O(n).
 */
export function odometer(xM: ArrayLike<number>, yM: ArrayLike<number>): Float64Array {
  const distanceM = new Float64Array(xM.length)
  let total = 0
  let anchor = 0
  for (let i = 1; i < xM.length; i++) {
    const dx = xM[i]! - xM[anchor]!
    const dy = yM[i]! - yM[anchor]!
    const square = dx * dx + dy * dy
    if (square >= ODOMETER_STEP_M * ODOMETER_STEP_M) {
      total += Math.sqrt(square)
      anchor = i
    }
    distanceM[i] = total
  }
  return distanceM
}

/**
 * Refuses a line that is crossed without end, by the track of a receiver gone astray or where a line covers half the
 * circuit. A car that waits on the line, whose noise crosses it thousands of times, counts once.
 * @param crossings in order of time
 * @throws {LapsError} 'line_crossed_too_often' above 2000 crossings. O(n).
 */
export function refuseTooMany(crossings: readonly Pass[]): void {
  let counted: Pass | undefined
  let count = 0
  for (const crossing of crossings) {
    if (counted && lingers(counted, crossing)) continue
    counted = crossing
    count++
  }
  if (count <= MOST_CROSSINGS) return
  throw new LapsError('line_crossed_too_often', `This log crosses one of the timing lines more than ${MOST_CROSSINGS} times. Draw the line shorter, just across the track, and check the positions of the log.`)
}

/** Is the car still where it crossed the line before? */
function lingers(before: Pass, crossing: Pass): boolean {
  return crossing.distanceM - before.distanceM < LINGER_M
    && Math.abs(crossing.offsetM - before.offsetM) < LINGER_ASIDE_M
}

/**
 * Crossings in runs that belong to one passing of the line, each run with the sense of its sum: a car that waits on the
 * line or rolls back over it has passed once, one that turns round has not passed at all.
 * @param crossings in order of time
 * @returns the first crossing of each run whose senses do not cancel, with the sense of the sum. O(n).
 */
export function passings(crossings: readonly Pass[]): Pass[] {
  const runs: Pass[][] = []
  let previous: Pass | undefined
  for (const crossing of crossings) {
    if (previous && lingers(previous, crossing)) runs.at(-1)!.push(crossing)
    else runs.push([crossing])
    previous = crossing
  }
  return runs.flatMap((run) => {
    const sum = run.reduce((total, crossing) => total + crossing.sense, 0)
    return sum === 0 ? [] : [{ ...run[0]!, sense: sum > 0 ? 1 : -1 }]
  })
}

/**
 * The sense in which a line is usually passed: that of the majority. Where the line is passed both ways about equally
 * often and at different places, it cuts two straights, and the one nearest to its middle says which sense is meant.
 * @returns +1 where nothing passes. O(n).
 */
export function usualSense(passed: readonly Pass[]): 1 | -1 {
  const ahead = passed.filter(pass => pass.sense === 1).length
  const back = passed.length - ahead
  if (ahead > 0 && back > 0 && 2 * Math.min(ahead, back) >= Math.max(ahead, back)) {
    const middle = passed.reduce((best, pass) => Math.abs(pass.offsetM) < Math.abs(best.offsetM) ? pass : best)
    const twoStraights = !passed.some(pass =>
      pass.sense !== middle.sense && Math.abs(pass.offsetM - middle.offsetM) <= SAME_STRAIGHT_M)
    if (twoStraights) return middle.sense
  }
  if (ahead === back) return passed[0]?.sense ?? 1
  return ahead > back ? 1 : -1
}

/**
 * Length of a lap: the median of the distances between passings of one place on the line in one sense, each weighted
 * with itself, so that crossings while waiting weigh nothing and a lap that missed the line only as much as it is long.
 * @param crossings of one sense, in order of time
 * @returns metres, NaN where no place was passed twice. O(n log n).
 */
export function lapDistance(crossings: readonly Pass[]): number {
  const distances: number[] = []
  const last: Pass[] = []
  for (const crossing of crossings) {
    const k = last.findIndex(pass => Math.abs(pass.offsetM - crossing.offsetM) <= SAME_STRAIGHT_M)
    if (k >= 0) distances.push(crossing.distanceM - last[k]!.distanceM)
    if (k >= 0) last[k] = crossing
    else last.push(crossing)
  }
  distances.sort((a, b) => a - b)
  const half = distances.reduce((sum, distance) => sum + distance, 0) / 2
  let sum = 0
  for (const distance of distances) {
    sum += distance
    if (sum >= half && distance > 0) return distance
  }
  return Number.NaN
}

/**
 * The crossings that count: of one sense; the first where the same place is crossed again before a third of a lap has
 * been driven; and of several straights that the line cuts the one where the car passes nearest to the line's middle.
 * @param crossings in order of time
 * @param lapM length of a lap, NaN = not known
 * @returns in order of time. O(n m), m the crossings within a lap that stand.
 */
export function countingCrossings(crossings: readonly Pass[], sense: 1 | -1, lapM: number): Pass[] {
  const thirdM = Math.max(SHORTEST_THIRD_M, (lapM || 0) / 3)
  const standing: Pass[] = []
  for (const crossing of crossings) {
    if (crossing.sense !== sense || crossing.gap === 'disagrees') continue
    let again = false
    for (let k = standing.length - 1; k >= 0 && crossing.distanceM - standing[k]!.distanceM < thirdM; k--) {
      if (Math.abs(crossing.offsetM - standing[k]!.offsetM) <= SAME_STRAIGHT_M) again = true
    }
    if (!again) standing.push(crossing)
  }
  const withinM = lapM > 0 ? WITHIN_LAP * lapM : Infinity
  let from = 0
  return standing.filter((crossing) => {
    while (crossing.distanceM - standing[from]!.distanceM >= withinM) from++
    for (let k = from; k < standing.length && standing[k]!.distanceM - crossing.distanceM < withinM; k++) {
      const { offsetM } = standing[k]!
      const nearer = Math.abs(offsetM) < Math.abs(crossing.offsetM)
      if (nearer && Math.abs(offsetM - crossing.offsetM) > SAME_STRAIGHT_M) return false
    }
    return true
  })
}
