import { quantile } from './laps'

/** One lap-time axis for many strips: round numbers for its ends and its graph paper. All in seconds. */
export interface LapAxis {
  fromS: number
  toS: number
  /** Labelled ticks, on multiples of `majorS`. */
  ticksS: number[]
  majorS: number
  /** Width of a small square of the graph paper; `majorS` is a multiple of it. */
  minorS: number
  /** Slower laps are parked past a break, drawn by rank between these two; null when there are none. */
  parked: { fromS: number, toS: number } | null
}

/** Round steps, each with the number of small squares in it. */
const STEPS: readonly [number, number][] = [
  [0.1, 10], [0.2, 4], [0.5, 5], [1, 10], [2, 4], [5, 5], [10, 10], [20, 4], [30, 6], [60, 6], [120, 12], [300, 5],
]
const MOST_TICKS = 5
/** Narrower than this the axis would show noise as if it were spread. */
const LEAST_SPAN_S = 0.5

/**
 * A robust axis: it ends at the slowest counted lap, or at Tukey's outer fence (third quartile plus three times the
 * middle half) when a counted lap lies beyond, so that one slow lap does not press all others together. Laps left out
 * extend it by at most its own length; whatever is slower is parked.
 * @param countedS times of counted laps
 * @param othersS times of all other laps
 * @param marksS times that are marked on the axis and must be on it, such as the sum of best sectors
 * @returns null without a single time
 * @see Tukey, Exploratory Data Analysis (1977), on outer fences. O(n log n).
 */
export function lapAxis(
  countedS: readonly number[], othersS: readonly number[], marksS: readonly number[],
): LapAxis | null {
  const baseS = countedS.length > 0 ? countedS : othersS
  if (baseS.length === 0) return null
  const fenceS = quantile(baseS, 0.75) + 3 * (quantile(baseS, 0.75) - quantile(baseS, 0.25))
  let lowS = Math.min(...baseS, ...marksS)
  let highS = Math.max(Math.min(Math.max(...baseS), fenceS), ...marksS)
  const spanS = Math.max(highS - lowS, LEAST_SPAN_S)
  const near = othersS.filter(timeS => timeS > lowS - spanS && timeS < highS + spanS)
  lowS = Math.min(lowS, ...near)
  highS = Math.max(highS, ...near, lowS + LEAST_SPAN_S)
  const [majorS, squares] = STEPS.find(([step]) => (highS - lowS) / step <= MOST_TICKS) ?? STEPS.at(-1)!
  const minorS = majorS / squares
  const padS = 0.03 * (highS - lowS)
  const from = Math.floor((lowS - padS) / minorS)
  const to = Math.ceil((highS + padS) / minorS)
  const slowS = [...countedS, ...othersS].filter(timeS => timeS > to * minorS)
  return {
    fromS: from * minorS,
    toS: to * minorS,
    ticksS: multiples(from, to, squares).map(k => k * minorS),
    majorS,
    minorS,
    parked: slowS.length > 0 ? { fromS: Math.min(...slowS), toS: Math.max(...slowS) } : null,
  }
}

/** Multiples of `every` from `from` to `to`, both included. Whole numbers, so that no step is lost to rounding. */
function multiples(from: number, to: number, every: number): number[] {
  const out: number[] = []
  for (let k = Math.ceil(from / every) * every; k <= to; k += every) out.push(k)
  return out
}

/** Graph paper of an axis: where its small and its large squares end, seconds. Large ones every half major step. */
export function axisGrid(axis: LapAxis): { smallS: number[], largeS: number[] } {
  const from = Math.round(axis.fromS / axis.minorS)
  const to = Math.round(axis.toS / axis.minorS)
  const squares = Math.round(axis.majorS / axis.minorS)
  const large = squares % 2 === 0 ? squares / 2 : squares
  const all = multiples(from, to, 1)
  return {
    smallS: all.filter(k => k % large !== 0).map(k => k * axis.minorS),
    largeS: all.filter(k => k % large === 0).map(k => k * axis.minorS),
  }
}

/** Where lap times lie on a strip of some width, in the units of its view box. */
export interface StripScale {
  width: number
  /** First and last x of the even part of the axis. */
  x0: number
  x1: number
  /** Where the axis is broken; null when no lap is parked. */
  breakX: number | null
  x: (timeS: number) => number
}

const EDGE = 6
const PARK = { wide: 78, narrow: 66 }

/**
 * Lay an axis on a strip. Times faster than the axis are held at its left edge.
 * @param width of the view box
 * @param narrow whether it is the cut for a phone
 */
export function stripScale(axis: LapAxis, width: number, narrow: boolean): StripScale {
  const parked = axis.parked
  const x0 = EDGE
  const x1 = parked ? width - (narrow ? PARK.narrow : PARK.wide) : width - EDGE
  const breakX = parked ? x1 + 8 : null
  const even = (timeS: number) => x0 + (timeS - axis.fromS) / (axis.toS - axis.fromS) * (x1 - x0)
  return {
    width,
    x0,
    x1,
    breakX,
    x: (timeS) => {
      if (parked === null || breakX === null || timeS <= axis.toS) return Math.max(x0, even(timeS))
      const share = parked.toS > parked.fromS ? (timeS - parked.fromS) / (parked.toS - parked.fromS) : 0.5
      return breakX + 16 + share * (width - breakX - 26)
    },
  }
}
