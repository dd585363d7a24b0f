import { makePlane, toPlane } from '../../../shared/plane'
import type { Plane } from '../../../shared/plane'
import { findBrakings } from './braking'
import type { Braking } from './braking'
import { LapsError } from './errors'
import { interpolate } from './interpolate'
import { deriveMotion } from './motion'
import { lapPath, placeOnPath } from './place'
import type { LapPath } from './place'

/** Values further apart are not joined by a straight line, unless they are neighbours. */
const BRIDGE_S = 0.5

/** The samples of one lap and of a second or so before and after it. */
export interface LapTrace {
  /** Strictly rising, length n, seconds on the log's clock. */
  timeS: ArrayLike<number>
  /** Length n, degrees, NaN = missing. */
  latitudeDeg: ArrayLike<number>
  longitudeDeg: ArrayLike<number>
  /** Logged channels by name, in the units of storage, length n, NaN = missing. */
  channels: Readonly<Record<string, ArrayLike<number>>>
  startS: number
  lapTimeS: number
}

export type Source = 'logged' | 'derived'

export interface ComparedLap {
  lapTimeS: number
  /** Since the lap's start, by station; 0 at first, the lap time at last, rising. */
  elapsedS: Float64Array
  speedMps: Float64Array
  /** Positive when speeding up. */
  longitudinalMps2: Float64Array
  /** Positive in a left-hand bend. */
  lateralMps2: Float64Array
  /** The car's own way, in the plane at the start of the faster lap: east and north. */
  xM: Float64Array
  yM: Float64Array
  source: { speed: Source, longitudinal: Source, lateral: Source }
  /** Times since the lap's start. */
  brakings: Braking[]
}

export interface Comparison {
  /** Whose path station is measured along: the faster lap's. */
  reference: 'a' | 'b'
  lengthM: number
  /** 0, step, 2 step, ... and the length. */
  stationM: Float64Array
  /** Time that a has lost on b since the start, by station (negative: gained). */
  differenceS: Float64Array
  a: ComparedLap
  b: ComparedLap
}

/** A lap in the plane, with what is drawn of it, on the samples that have a position. */
interface PlacedLap {
  path: LapPath
  timeS: Float64Array
  speedMps: Float64Array
  longitudinalMps2: Float64Array
  lateralMps2: Float64Array
  source: ComparedLap['source']
}

/** The plane at the position nearest in time to a lap's start. */
function planeAtStart(lap: LapTrace): Plane {
  let nearest = -1
  for (let i = 0; i < lap.timeS.length; i++) {
    if (Number.isNaN(lap.latitudeDeg[i]!) || Number.isNaN(lap.longitudeDeg[i]!)) continue
    if (nearest < 0 || Math.abs(lap.timeS[i]! - lap.startS) < Math.abs(lap.timeS[nearest]! - lap.startS)) nearest = i
  }
  if (nearest < 0) throw new LapsError('no_position', 'the lap has no position')
  return makePlane(lap.latitudeDeg[nearest]!, lap.longitudeDeg[nearest]!)
}

/** Path, motion and logged channels of a lap on one plane. */
function placed(lap: LapTrace, plane: Plane): PlacedLap {
  const { xM, yM } = toPlane(plane, lap.latitudeDeg, lap.longitudeDeg)
  const known: number[] = []
  for (let i = 0; i < xM.length; i++) if (!Number.isNaN(xM[i]!)) known.push(i)
  const pick = (values: ArrayLike<number>) => {
    const picked = new Float64Array(known.length)
    for (let k = 0; k < picked.length; k++) picked[k] = values[known[k]!]!
    return picked
  }
  const endS = lap.startS + lap.lapTimeS
  const logged = (name: string): Float64Array | null => {
    const channel = lap.channels[name]
    if (!channel) return null
    const values = pick(channel)
    const within = (i: number) => lap.timeS[i]! >= lap.startS && lap.timeS[i]! <= endS
    return known.some((i, k) => within(i) && Number.isFinite(values[k]!)) ? values : null
  }
  const timeS = pick(lap.timeS)
  const x = pick(xM)
  const y = pick(yM)
  const speed = logged('speed')
  const longitudinal = logged('longitudinal_acceleration')
  const lateral = logged('lateral_acceleration')
  const derived = speed && longitudinal && lateral ? null : deriveMotion(timeS, x, y, speed)
  const source = (values: Float64Array | null): Source => values ? 'logged' : 'derived'
  return {
    path: lapPath(timeS, x, y, lap.startS, lap.lapTimeS),
    timeS,
    speedMps: derived?.speedMps ?? speed!,
    longitudinalMps2: longitudinal ?? derived!.longitudinalMps2,
    lateralMps2: lateral ?? derived!.lateralMps2,
    source: { speed: source(speed), longitudinal: source(longitudinal), lateral: source(lateral) },
  }
}

/** Time since the lap's start by station: straight lines between the points where station rises, exact at both ends. */
function elapsedBy(stationM: Float64Array, path: LapPath, lapTimeS: number, gridM: Float64Array): Float64Array {
  const lengthM = gridM.at(-1)!
  const at = [0]
  const elapsed = [0]
  for (let i = 1; i + 1 < stationM.length; i++) {
    if (stationM[i]! <= at.at(-1)! || stationM[i]! >= lengthM) continue
    at.push(stationM[i]!)
    elapsed.push(path.timeS[i]! - path.timeS[0]!)
  }
  at.push(lengthM)
  elapsed.push(lapTimeS)
  return interpolate(at, elapsed, gridM, Infinity)
}

function comparedLap(lap: LapTrace, own: PlacedLap, reference: LapPath, gridM: Float64Array): ComparedLap {
  const placesM = placeOnPath(reference, own.path)
  const elapsedS = elapsedBy(placesM, own.path, lap.lapTimeS, gridM)
  const clockS = elapsedS.map(elapsed => Math.min(lap.startS + elapsed, own.path.timeS.at(-1)!))
  const byTime = (values: Float64Array) => interpolate(own.timeS, values, clockS, BRIDGE_S)
  const from = own.timeS.findIndex(t => t >= lap.startS)
  const to = own.timeS.findLastIndex(t => t <= lap.startS + lap.lapTimeS) + 1
  const sampleS = own.timeS.subarray(from, to)
  return {
    lapTimeS: lap.lapTimeS,
    elapsedS,
    speedMps: byTime(own.speedMps),
    longitudinalMps2: byTime(own.longitudinalMps2),
    lateralMps2: byTime(own.lateralMps2),
    xM: interpolate(own.path.timeS, own.path.xM, clockS, Infinity),
    yM: interpolate(own.path.timeS, own.path.yM, clockS, Infinity),
    source: own.source,
    brakings: findBrakings(
      interpolate(own.path.timeS, placesM, sampleS, Infinity),
      sampleS.map(t => t - lap.startS),
      own.speedMps.subarray(from, to),
      own.longitudinalMps2.subarray(from, to),
    ),
  }
}

/** 0, step, 2 step, ... and the length itself; a last step of less than a millionth is none. */
function gridOf(lengthM: number, stepM: number): Float64Array {
  const steps = Math.max(1, Math.ceil(lengthM / stepM - 1e-6))
  return Float64Array.from({ length: steps + 1 }, (_, k) => k === steps ? lengthM : k * stepM)
}

/** The faster lap; of two equal ones the shorter, then the earlier, so that it does not matter which is called a. */
function faster(a: LapTrace, b: LapTrace, pathA: LapPath, pathB: LapPath): 'a' | 'b' {
  const order = a.lapTimeS - b.lapTimeS || pathA.stationM.at(-1)! - pathB.stationM.at(-1)! || a.startS - b.startS
  return order <= 0 ? 'a' : 'b'
}

/**
 * Hold two laps against each other by station along the path of the faster one.
 *
 * The difference at a station is t_a - t_b, each time by straight lines between the points of the lap's path where its
 * station rises; it is exactly 0 at the start and exactly the difference of the lap times at the end. Speed and
 * accelerations are the logged channels where the lap has them, else derived from position (or, for the longitudinal
 * acceleration, from logged speed); `source` says which. Brakings are found on the lap's own samples.
 *
 * @param a, b laps of one layout, with a margin of at least three samples at both ends
 * @param options.stepM distance between stations, metres
 * @throws {LapsError} 'bad_step' | 'no_position' | 'lap_not_covered' | 'lap_too_long' | 'length_mismatch'
 * @see `placeOnPath`, `deriveMotion`, `findBrakings`. O(n + length / step).
 */
export function compareLaps(a: LapTrace, b: LapTrace, options: { stepM: number }): Comparison {
  if (!(options.stepM > 0)) throw new LapsError('bad_step', 'the step between stations must be longer than nothing')
  // One plane for both, whichever is called a.
  const first = a.lapTimeS - b.lapTimeS || a.startS - b.startS || a.latitudeDeg[0]! - b.latitudeDeg[0]!
  const plane = planeAtStart(first <= 0 ? a : b)
  const placedA = placed(a, plane)
  const placedB = placed(b, plane)
  const reference = faster(a, b, placedA.path, placedB.path)
  const referencePath = reference === 'a' ? placedA.path : placedB.path
  const lengthM = referencePath.stationM.at(-1)!
  const stationM = gridOf(lengthM, options.stepM)
  const lapA = comparedLap(a, placedA, referencePath, stationM)
  const lapB = comparedLap(b, placedB, referencePath, stationM)
  return {
    reference,
    lengthM,
    stationM,
    differenceS: lapA.elapsedS.map((elapsed, k) => elapsed - lapB.elapsedS[k]!),
    a: lapA,
    b: lapB,
  }
}
