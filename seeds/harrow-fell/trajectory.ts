import type { DrivenOuting } from './drive'
import { pathAt } from './path'

/** The car at an instant. */
export interface CarState {
  /** Unwrapped station, metres. */
  stationM: number
  eastM: number
  northM: number
  headingRad: number
  speedMps: number
  longitudinalMps2: number
  /** Positive in a left-hand bend. */
  lateralMps2: number
  curvaturePerM: number
  throttle: number
  brakeBar: number
  gear: number
}

/** Seconds from the first movement to standstill. */
export function drivingTimeS(outing: DrivenOuting): number {
  return outing.timeS[outing.timeS.length - 1]!
}

/**
 * The car at any instant of an outing, on the continuous motion itself. Before the start and after the end it stands.
 * @param timeS seconds since the car moved off
 */
export function stateAt(outing: DrivenOuting, timeS: number): CarState {
  const { track, offset, fromM, stationRateMps, accelMps2, throttle, brakeBar } = outing
  const i = cellAt(outing.timeS, timeS)
  const spentS = Math.min(Math.max(timeS, 0), drivingTimeS(outing)) - outing.timeS[i]!
  const [w0, w1] = [stationRateMps[i]!, stationRateMps[i + 1]!]
  const slope = (w1 * w1 - w0 * w0) / 2
  const share = Math.min(1, w0 * spentS + slope * spentS * spentS / 2)
  const mix = (values: ArrayLike<number>) => values[i]! + (values[i + 1]! - values[i]!) * share
  const standing = timeS <= 0 || timeS >= drivingTimeS(outing)
  const p = pathAt(track, offset, fromM + i + share)
  const speedMps = standing ? 0 : p.stretch * (w0 + slope * spentS)
  return {
    stationM: fromM + i + share,
    eastM: p.eastM,
    northM: p.northM,
    headingRad: p.headingRad,
    speedMps,
    longitudinalMps2: standing ? 0 : mix(accelMps2),
    lateralMps2: speedMps * speedMps * p.curvaturePerM,
    curvaturePerM: p.curvaturePerM,
    throttle: standing ? 0 : mix(throttle),
    brakeBar: standing ? 6 : mix(brakeBar),
    gear: outing.gear[i]!,
  }
}

/**
 * The instant at which the car reaches a station, in closed form.
 * @param stationM unwrapped; between the first and the last node
 * @throws {RangeError} for a station that the outing does not reach
 */
export function timeAtStation(outing: DrivenOuting, stationM: number): number {
  const along = stationM - outing.fromM
  const last = outing.timeS.length - 1
  if (!(along >= 0 && along <= last)) {
    throw new RangeError(`the outing does not pass station ${stationM} m`)
  }
  const i = Math.min(Math.floor(along), last - 1)
  const [w0, w1] = [outing.stationRateMps[i]!, outing.stationRateMps[i + 1]!]
  const restM = along - i
  if (restM === 0) {
    return outing.timeS[i]!
  }
  const rate = Math.sqrt(w0 * w0 + (w1 * w1 - w0 * w0) * restM)
  return outing.timeS[i]! + 2 * restM / (w0 + rate)
}

/** Index of the cell [timeS[i], timeS[i + 1]) that holds an instant; the first or last one outside. */
function cellAt(timeS: Float64Array, instantS: number): number {
  let low = 0
  let high = timeS.length - 2
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (timeS[middle]! <= instantS) {
      low = middle
    }
    else {
      high = middle - 1
    }
  }
  return low
}
