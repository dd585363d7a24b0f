import { LapsError } from './errors'
import { interpolate } from './interpolate'

/** Hardest braking of a zone, held this long (common practice, no source). */
const PEAK_MPS2 = 0.3 * 9.80665
const PEAK_HELD_S = 0.3
/** A zone reaches as far as the car slows down at all more than coasting does (common practice, no source). */
const ZONE_MPS2 = 0.1 * 9.80665
/** Shorter pauses do not part a zone. */
const PAUSE_S = 0.3
/** Half the window of the running mean that takes an accelerometer's shaking out. */
const HALF_MEAN_S = 0.1
/** Levels of the zone's own deceleration through which the line is laid, and the one to which it is extended. */
const LOW = 0.35
const HIGH = 0.70
const ONSET = 0.15

export interface Braking {
  /** Where, when and at what speed braking begins. */
  onsetStationM: number
  onsetTimeS: number
  onsetSpeedMps: number
  /** Where and when it ends. */
  releaseStationM: number
  releaseTimeS: number
  /** Hardest deceleration, positive. */
  peakMps2: number
}

/** Running mean over 0.1 s either way of the deceleration (positive when slowing), for samples that have one. */
function meanDeceleration(timeS: ArrayLike<number>, longitudinalMps2: ArrayLike<number>): { t: number[], d: number[] } {
  const t: number[] = []
  const raw: number[] = []
  for (let i = 0; i < timeS.length; i++) {
    if (Number.isNaN(longitudinalMps2[i]!)) continue
    t.push(timeS[i]!)
    raw.push(-longitudinalMps2[i]!)
  }
  const d: number[] = []
  for (let i = 0; i < t.length; i++) {
    let sum = raw[i]!
    let count = 1
    // Pairs on both sides only, so that the mean does not move a ramp at the ends.
    for (let k = 1; i - k >= 0 && i + k < t.length; k++) {
      if (Math.max(t[i]! - t[i - k]!, t[i + k]! - t[i]!) > HALF_MEAN_S * 1.001) break
      sum += raw[i - k]! + raw[i + k]!
      count += 2
    }
    d.push(sum / count)
  }
  return { t, d }
}

/** First and last sample of every stretch that slows down hard enough for long enough. */
function zones(t: readonly number[], d: readonly number[]): [number, number][] {
  const stretches: [number, number][] = []
  for (let i = 0; i < t.length; i++) {
    if (d[i]! < ZONE_MPS2) continue
    const last = stretches.at(-1)
    if (last && (last[1] === i - 1 || t[i]! - t[last[1]]! <= PAUSE_S)) last[1] = i
    else stretches.push([i, i])
  }
  return stretches.filter(([from, to]) => {
    let since = Number.NaN
    for (let i = from; i <= to; i++) {
      if (d[i]! < PEAK_MPS2) since = Number.NaN
      else if (Number.isNaN(since)) since = i > 0 ? (t[i]! + t[i - 1]!) / 2 : t[i]!
      const until = i + 1 < t.length ? (t[i]! + t[i + 1]!) / 2 : t[i]!
      if (until - since >= PEAK_HELD_S - 1e-9) return true
    }
    return false
  })
}

/** Mean of the strongest quarter of a zone: its own deceleration. */
function ownDeceleration(d: readonly number[], from: number, to: number): number {
  const sorted = d.slice(from, to + 1).sort((a, b) => b - a)
  const strongest = sorted.slice(0, Math.ceil(sorted.length / 4))
  return strongest.reduce((sum, value) => sum + value, 0) / strongest.length
}

/**
 * The straight line through 35 and 70 % of a flank, extended to 15 %: 70 % where it is first reached from outside, 35 %
 * where it was last passed before that. Where the lap does not hold the whole flank, the zone's own end.
 * @param from the zone's end on this side
 * @param to   its other end
 */
function flank(t: readonly number[], d: readonly number[], from: number, to: number, own: number): number {
  const step = from <= to ? 1 : -1
  let inside = from
  while (inside !== to && d[inside]! < HIGH * own) inside += step
  const passedAt = (level: number): number => {
    let i = inside
    while (i >= 0 && i < t.length && d[i]! >= level) i -= step
    if (i < 0 || i >= t.length) return Number.NaN
    return t[i]! + (level - d[i]!) / (d[i + step]! - d[i]!) * (t[i + step]! - t[i]!)
  }
  const low = passedAt(LOW * own)
  const high = passedAt(HIGH * own)
  const at = low - (high - low) * (LOW - ONSET) / (HIGH - LOW)
  return Number.isNaN(at) ? t[from]! : Math.min(t.at(-1)!, Math.max(t[0]!, at))
}

/**
 * Every braking of a lap, without a brake channel: stretches that slow down by more than 0.3 g for 0.3 s.
 *
 * Braking begins where the straight line through 35 and 70 % of the zone's own deceleration (the mean of its strongest
 * quarter) comes down to 15 %, and ends where the same line on the other flank does. A fixed threshold would answer to
 * lifting the throttle early and to hills. A zone that the lap's start or end cuts begins or ends there.
 *
 * @param stationM rising, length n, metres
 * @param timeS strictly rising, length n, seconds
 * @param speedMps length n, m/s
 * @param longitudinalMps2 length n, m/s2, negative when slowing down, NaN = missing
 * @returns in driving order
 * @throws {LapsError} 'length_mismatch'
 * @see the project's own definition; levels common practice, no source. O(n log n).
 */
export function findBrakings(
  stationM: ArrayLike<number>,
  timeS: ArrayLike<number>,
  speedMps: ArrayLike<number>,
  longitudinalMps2: ArrayLike<number>,
): Braking[] {
  const n = timeS.length
  if (stationM.length !== n || speedMps.length !== n || longitudinalMps2.length !== n) {
    throw new LapsError('length_mismatch', 'station, time, speed and acceleration differ in length')
  }
  const at = (values: ArrayLike<number>, atS: number): number => interpolate(timeS, values, [atS], Infinity)[0]!
  const { t, d } = meanDeceleration(timeS, longitudinalMps2)
  return zones(t, d).map(([from, to]) => {
    const own = ownDeceleration(d, from, to)
    const onsetTimeS = flank(t, d, from, to, own)
    const releaseTimeS = flank(t, d, to, from, own)
    return {
      onsetStationM: at(stationM, onsetTimeS),
      onsetTimeS,
      onsetSpeedMps: at(speedMps, onsetTimeS),
      releaseStationM: at(stationM, releaseTimeS),
      releaseTimeS,
      peakMps2: d.slice(from, to + 1).reduce((peak, value) => Math.max(peak, value), 0),
    }
  })
}
