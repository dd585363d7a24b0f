import { countingCrossings, lapDistance, passings, usualSense } from './passes'
import type { Pass } from './passes'
import type { DrivingDirection } from './types'

/** Loops that enclose less than this part of a circle of their length go neither way round (a figure of eight). */
const ROUND_ENOUGH = 0.02

/** How the start/finish line is driven in a log. */
export interface StartSense {
  /** null where the log was driven only against the direction asked for. */
  sense: 1 | -1 | null
  /** Length of a lap, metres; NaN where none was completed. */
  lapM: number
}

/**
 * Which way round a loop goes.
 * @param from first sample of the loop
 * @param to   last sample of the loop, closed by the straight line back to the first
 * @returns +1 anticlockwise, -1 clockwise, 0 where it is about as much of the one as of the other. O(to - from).
 */
export function loopSense(
  xM: ArrayLike<number>,
  yM: ArrayLike<number>,
  from: number,
  to: number,
  lengthM: number,
): -1 | 0 | 1 {
  let twiceArea = 0
  for (let i = from; i <= to; i++) {
    const j = i === to ? from : i + 1
    twiceArea += (xM[i]! - xM[from]!) * (yM[j]! - yM[from]!) - (xM[j]! - xM[from]!) * (yM[i]! - yM[from]!)
  }
  const circleM2 = lengthM * lengthM / (4 * Math.PI)
  if (!(Math.abs(twiceArea / 2) > ROUND_ENOUGH * circleM2)) return 0
  return twiceArea > 0 ? 1 : -1
}

/**
 * The sense in which the start/finish line has to be crossed. Without a direction it is the usual one. With one it is
 * the sense whose loops go that way round (at least half of them; loops without a clear way round fit both); a log
 * without a complete lap is believed.
 * @param crossings of the start/finish line, in order of time
 * @param path the samples that the crossings' `sample` counts
 */
export function startSense(
  crossings: readonly Pass[],
  path: { xM: ArrayLike<number>, yM: ArrayLike<number> },
  direction: DrivingDirection | null,
): StartSense {
  const trusted = crossings.filter(crossing => crossing.gap !== 'disagrees')
  const usual = usualSense(passings(trusted))
  const lapMOf = (sense: 1 | -1) => lapDistance(trusted.filter(crossing => crossing.sense === sense))
  if (direction === null) return { sense: usual, lapM: lapMOf(usual) }
  const wanted = direction === 'anticlockwise' ? 1 : -1
  let wrongWay = false
  for (const sense of usual === 1 ? [1, -1] as const : [-1, 1] as const) {
    const lapM = lapMOf(sense)
    const counting = countingCrossings(trusted, sense, lapM)
    const loops = counting.slice(1).map((end, k) =>
      loopSense(path.xM, path.yM, counting[k]!.sample + 1, end.sample, end.distanceM - counting[k]!.distanceM))
    const fitting = loops.filter(loop => loop === 0 || loop === wanted).length
    if (loops.length > 0 && 2 * fitting >= loops.length) return { sense, lapM }
    if (loops.length > 0) wrongWay = true
  }
  return { sense: wrongWay ? null : usual, lapM: lapMOf(usual) }
}
