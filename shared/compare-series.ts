import type { ComparedLap } from './schemas/compare'

/** A channel by station; null where it is missing. */
type Series = readonly (number | null)[]

/** Points to draw: station and value. */
export type Points = [number, number | null][]

/** A braking zone of each lap that belong together; null where a lap has none near the other's. */
export interface BrakingPair {
  /** Counts from 1 along the lap. */
  number: number
  lap: ComparedLap['brakings'][number] | null
  against: ComparedLap['brakings'][number] | null
  /** Onset of the lap minus onset of the other, metres: negative when the lap brakes earlier. null without a pair. */
  earlierM: number | null
}

/** Onsets further apart than this are not the same braking, metres. Common practice, no source. */
const SAME_BRAKING_M = 80

/**
 * Put the brakings of two laps side by side in order of station. Two belong together when each is the other's nearest
 * and they are within 80 m. O(n m), for some dozen zones.
 */
export function pairBrakings(lap: ComparedLap['brakings'], against: ComparedLap['brakings']): BrakingPair[] {
  const nearest = (onsetM: number, among: ComparedLap['brakings']) => {
    let best: ComparedLap['brakings'][number] | null = null
    for (const one of among) if (!best || Math.abs(one.onsetM - onsetM) < Math.abs(best.onsetM - onsetM)) best = one
    return best && Math.abs(best.onsetM - onsetM) <= SAME_BRAKING_M ? best : null
  }
  const rows: Omit<BrakingPair, 'number'>[] = []
  const taken = new Set<ComparedLap['brakings'][number]>()
  for (const mine of lap) {
    const other = nearest(mine.onsetM, against)
    const pair = other && !taken.has(other) && nearest(other.onsetM, lap) === mine ? other : null
    if (pair) taken.add(pair)
    rows.push({ lap: mine, against: pair, earlierM: pair ? mine.onsetM - pair.onsetM : null })
  }
  for (const other of against) if (!taken.has(other)) rows.push({ lap: null, against: other, earlierM: null })
  const at = (row: Omit<BrakingPair, 'number'>) => row.lap?.onsetM ?? row.against!.onsetM
  return rows.sort((p, q) => at(p) - at(q)).map((row, i) => ({ number: i + 1, ...row }))
}

/** Index of the station nearest to a place. `stationM` rises. O(log n). */
export function nearestStation(stationM: readonly number[], atM: number): number {
  let low = 0
  let high = stationM.length - 1
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (stationM[middle]! <= atM) low = middle
    else high = middle
  }
  return atM - stationM[low]! <= stationM[high]! - atM ? low : high
}

/** Points of a trace for drawing, scaled; null leaves a gap. */
export function tracePoints(stationM: readonly number[], values: Series, scale: number): Points {
  return stationM.map((atM, i) => {
    const value = values[i] ?? null
    return [atM, value === null ? null : value * scale]
  })
}

/** Lowest and highest of the values that are there; null when none is. */
export function extentOf(...series: Series[]): { low: number, high: number } | null {
  let low = Infinity
  let high = -Infinity
  for (const values of series) {
    for (const value of values) {
      if (value === null) continue
      if (value < low) low = value
      if (value > high) high = value
    }
  }
  return low <= high ? { low, high } : null
}

/** An axis whose ends and ticks are round. `step` is 1, 2 or 5 times a power of ten. */
export interface RoundAxis { min: number, max: number, step: number }

/**
 * The axis with the fewest round steps that holds the values, at most `steps` of them.
 * @param withZero widen the axis to hold zero
 */
export function roundAxis(extent: { low: number, high: number }, steps: number, withZero = false): RoundAxis {
  const low = withZero ? Math.min(0, extent.low) : extent.low
  const high = withZero ? Math.max(0, extent.high) : extent.high
  const wish = Math.max((high - low) / steps, 1e-3)
  let power = 10 ** Math.floor(Math.log10(wish))
  for (;;) {
    for (const lead of [1, 2, 5]) {
      const step = lead * power
      const min = Math.floor(low / step + 1e-9)
      const max = Math.max(min + 1, Math.ceil(high / step - 1e-9))
      if (max - min <= steps) return { min: tidy(min * step), max: tidy(max * step), step: tidy(step) }
    }
    power *= 10
  }
}

/** Take away what binary fractions add: 0.30000000000000004. */
function tidy(value: number): number {
  return Number(value.toPrecision(12))
}

/** Where two series are furthest apart, and the first minus the second there; null when no station has both. */
export function widestApart(
  stationM: readonly number[], first: Series, second: Series,
): { atM: number, by: number } | null {
  let found: { atM: number, by: number } | null = null
  for (let i = 0; i < stationM.length; i++) {
    const a = first[i] ?? null
    const b = second[i] ?? null
    if (a === null || b === null) continue
    if (!found || Math.abs(a - b) > Math.abs(found.by)) found = { atM: stationM[i]!, by: a - b }
  }
  return found
}

/**
 * The stretch of a given length over which the difference changes most in the wanted direction.
 * @param differenceS time of the lap minus time of the other, by station
 * @param sign +1 to look for time lost, -1 for time gained
 * @returns null when nowhere it changes that way. O(n)
 */
export function steepestStretch(
  stationM: readonly number[], differenceS: Series, lengthM: number, sign: 1 | -1,
): { fromM: number, toM: number, changeS: number } | null {
  let found: { fromM: number, toM: number, changeS: number } | null = null
  let end = 0
  for (let start = 0; start < stationM.length; start++) {
    while (end < stationM.length - 1 && stationM[end]! - stationM[start]! < lengthM) end++
    const from = differenceS[start] ?? null
    const to = differenceS[end] ?? null
    if (from === null || to === null || stationM[end]! - stationM[start]! < lengthM) continue
    const changeS = to - from
    if (changeS * sign > 0 && (!found || Math.abs(changeS) > Math.abs(found.changeS))) {
      found = { fromM: stationM[start]!, toM: stationM[end]!, changeS }
    }
  }
  return found
}

/**
 * A trace cut where it passes zero, so that what lies above can be drawn otherwise than what lies below. Both parts get
 * the point at which the straight line between two samples is zero; null separates their pieces.
 */
export function splitAtZero(points: Readonly<Points>): { above: Points, below: Points } {
  const above: Points = []
  const below: Points = []
  for (const [i, [atM, value]] of points.entries()) {
    const before = points[i - 1]
    if (value !== null && before && before[1] !== null && before[1] * value < 0) {
      const zeroM = before[0] + (atM - before[0]) * before[1] / (before[1] - value)
      above.push([zeroM, 0])
      below.push([zeroM, 0])
    }
    above.push([atM, value !== null && value >= 0 ? value : null])
    below.push([atM, value !== null && value <= 0 ? value : null])
  }
  return { above, below }
}
