import type { Lap } from './schemas/days'

/** A lap slower than this share of the outing's best was not driven for a time. Common practice, no source. */
export const SLOW_SHARE = 1.07

/** What a lap is to the figures of its outing. Only `counted` laps enter them; nothing is hidden for that. */
export type LapStanding = 'counted' | 'excluded' | 'repeated' | 'gap' | 'slow' | 'out' | 'in'

/** The part of a lap that the figures need. */
export type LapFigure = Pick<Lap, 'kind' | 'timeS' | 'sectorsS' | 'flags' | 'excluded' | 'excludedReason'>

/**
 * What each lap of ONE outing is to its figures: counted = timed, not excluded by a person, not in a log added earlier,
 * no gap over a line, and within 107 % of the best lap of the outing for which the others hold. Cost O(n).
 * @param laps laps of one outing, in any order
 * @returns one standing a lap, in the same order
 */
export function lapStandings(laps: readonly LapFigure[]): LapStanding[] {
  const first = laps.map((lap): LapStanding => {
    if (lap.kind !== 'timed') return lap.kind
    if (lap.excluded) return 'excluded'
    if (lap.flags.includes('repeated')) return 'repeated'
    return lap.flags.includes('gap_at_line') ? 'gap' : 'counted'
  })
  const bestS = Math.min(...laps.filter((_, i) => first[i] === 'counted').map(lap => lap.timeS))
  return first.map((standing, i) => standing === 'counted' && laps[i]!.timeS > SLOW_SHARE * bestS ? 'slow' : standing)
}

/** The laps of one outing that enter its figures, in the order given. See `lapStandings`. */
export function countedLaps<T extends LapFigure>(laps: readonly T[]): T[] {
  const standings = lapStandings(laps)
  return laps.filter((_, i) => standings[i] === 'counted')
}

/** Why a timed lap does not count, in a few words; empty for counted, out and in laps. */
export function leftOutReason(lap: LapFigure, standing: LapStanding): string {
  if (standing === 'excluded') return lap.excludedReason || 'excluded'
  if (standing === 'repeated') return 'the log added first counts'
  if (standing === 'gap') return 'no fix at a line'
  return standing === 'slow' ? 'over 107 % of the best' : ''
}

/** The fastest of some laps, or null of none. The first one of equals. */
export function bestLap<T extends LapFigure>(laps: readonly T[]): T | null {
  return laps.reduce<T | null>((best, lap) => best === null || lap.timeS < best.timeS ? lap : best, null)
}

/**
 * Sample quantile of type 7 of Hyndman and Fan: linear between order statistics, at position p (n - 1) + 1.
 * @param values any order, unchanged
 * @param p from 0 to 1
 * @returns NaN of no values
 * @see Hyndman and Fan, Sample Quantiles in Statistical Packages, The American Statistician 50 (1996) 361-365.
 *   O(n log n).
 */
export function quantile(values: readonly number[], p: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  const position = p * (sorted.length - 1)
  const below = sorted[Math.floor(position)] ?? NaN
  const above = sorted[Math.ceil(position)] ?? NaN
  return below + (position - Math.floor(position)) * (above - below)
}

/** Median, NaN of no values. */
export function median(values: readonly number[]): number {
  return quantile(values, 0.5)
}

/** Width of the middle half: third quartile minus first, type 7; NaN of no values. */
export function middleHalf(values: readonly number[]): number {
  return quantile(values, 0.75) - quantile(values, 0.25)
}

/**
 * Sector times as they are shown: the lap's crossing instants are rounded to 1 ms first, so that the shown sectors add
 * up to the shown lap. Behind a missed line no instant is known, so what follows is rounded by itself.
 * @returns seconds on whole milliseconds, null where a line was missed
 */
export function shownSectors(lap: Pick<Lap, 'sectorsS'>): (number | null)[] {
  let endS: number | null = 0
  return lap.sectorsS.map((sectorS) => {
    if (sectorS === null) {
      endS = null
      return null
    }
    if (endS === null) return milliseconds(sectorS) / 1000
    const startS: number = endS
    endS = startS + sectorS
    return (milliseconds(endS) - milliseconds(startS)) / 1000
  })
}

function milliseconds(timeS: number): number {
  return Math.round(timeS * 1000)
}

/** Difference of two times as a reader of the shown figures works it out, s: each is rounded to 1 ms first. */
export function shownDifferenceS(a: number, b: number): number {
  return (milliseconds(a) - milliseconds(b)) / 1000
}

/**
 * Best time of each sector over some laps, as shown. Null for a sector that no lap has.
 * @param laps laps cut by the same lines; give counted laps only
 */
export function bestSectors(laps: readonly Pick<Lap, 'sectorsS'>[]): (number | null)[] {
  const shown = laps.map(shownSectors)
  const count = Math.max(0, ...shown.map(sectors => sectors.length))
  return Array.from({ length: count }, (_, i) => {
    const times = shown.map(sectors => sectors[i] ?? null).filter(time => time !== null)
    return times.length > 0 ? Math.min(...times) : null
  })
}

/**
 * Sum of the best sectors: what nobody drove in one lap.
 * @returns seconds; null with fewer than two sectors, or where a sector has no time
 */
export function sumOfBestSectors(laps: readonly Pick<Lap, 'sectorsS'>[]): number | null {
  const best = bestSectors(laps)
  if (best.length < 2 || best.includes(null)) return null
  return best.reduce<number>((sum, time) => sum + milliseconds(time ?? NaN), 0) / 1000
}

export interface LapFigures<T extends LapFigure> {
  counted: T[]
  best: T | null
  /** s; NaN without counted laps. */
  medianS: number
  /** s; NaN without counted laps. */
  middleHalfS: number
  /** s; null without sector lines or a full set of sectors. */
  sumOfBestS: number | null
}

/**
 * The key figures of outings that may be held against each other (one layout, one car, one kind of weather).
 * @param outings the laps of each outing, out and in laps among them; what counts is decided outing by outing
 */
export function lapFigures<T extends LapFigure>(outings: readonly (readonly T[])[]): LapFigures<T> {
  const counted = outings.flatMap(laps => countedLaps(laps))
  const timesS = counted.map(lap => lap.timeS)
  return {
    counted,
    best: bestLap(counted),
    medianS: median(timesS),
    middleHalfS: middleHalf(timesS),
    sumOfBestS: sumOfBestSectors(counted),
  }
}
