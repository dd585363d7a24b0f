import { gaussian, type Random } from './random'
import { naturalSpline, type Spline } from './spline'
import type { Track } from './track'

/** Distance between the knots of a driven line, metres of station; a whole number of them makes a lap. */
const KNOT_M = 8
/** A driver's own variation is drawn this many knots apart, so that it wanders over about a hundred metres. */
const VARIATION_KNOTS = 12
/** The middle of the car keeps this far from the centre line: half the asphalt, less half a car and some respect. */
const REACH_M = 3
/** Enough for offsets to settle within millimetres. */
const SWEEPS = 2000
const OVER_RELAXATION = 1.7
/** The pit lane lies inside the finish straight and corner 1: right of the centre line, beyond the timing line. */
export const PIT_OFFSET_M = -16
/** Where the pit lane joins the track, and where it leaves it. */
export const PIT_EXIT_M = { fromM: 295, toM: 365 } as const
export const PIT_ENTRY_M = { fromM: 2700, toM: 2790 } as const
/** Where an outing's log begins: in the pit lane, just past the line. */
export const START_M = 25
/** Where it ends: in the pit lane again, this far short of the line. */
export const STOP_SHORT_M = 45

const idealByTrack = new WeakMap<Track, Float64Array>()

/**
 * The fast line round a track as offsets from the centre line (left positive), one per knot: of all lines within reach
 * the one whose sum of squared second differences, that is, of curvature, is least. Projected Gauss-Seidel.
 * @see Heilmeier et al., Minimum curvature trajectory planning and control for an autonomous race car (2020), for why
 *   least curvature is close to least time
 */
export function idealLine(track: Track): Float64Array {
  const known = idealByTrack.get(track)
  if (known) {
    return known
  }
  const count = Math.round(track.lengthM / KNOT_M)
  const points = Array.from({ length: count }, (_, i) => track.at(i * KNOT_M))
  const [normalE, normalN] = [points.map(p => -Math.sin(p.headingRad)), points.map(p => Math.cos(p.headingRad))]
  const [eastM, northM] = [points.map(p => p.eastM), points.map(p => p.northM)]
  const offsets = new Float64Array(count)
  // The gradient at a point is the fourth difference there; the diagonal of the Hessian along a normal is 6.
  const fourth = (x: number[], i: number) => x[(i + count - 2) % count]! - 4 * x[(i + count - 1) % count]! + 6 * x[i]!
    - 4 * x[(i + 1) % count]! + x[(i + 2) % count]!
  for (let sweep = 0; sweep < SWEEPS; sweep++) {
    for (let i = 0; i < count; i++) {
      const slope = normalE[i]! * fourth(eastM, i) + normalN[i]! * fourth(northM, i)
      const offset = Math.min(REACH_M, Math.max(-REACH_M, offsets[i]! - OVER_RELAXATION * slope / 6))
      offsets[i] = offset
      eastM[i] = points[i]!.eastM + normalE[i]! * offset
      northM[i] = points[i]!.northM + normalN[i]! * offset
    }
  }
  idealByTrack.set(track, offsets)
  return offsets
}

/**
 * The line of a whole outing as the offset from the centre line by unwrapped station: out of the pit lane, round and
 * round near the fast line, each lap a little different, and into the pit lane again. `spreadM` is the standard
 * deviation of the driver's variation; laps run on into each other smoothly.
 * @param timedLaps complete laps between the out lap and the in lap
 */
export function outingLine(track: Track, timedLaps: number, spreadM: number, random: Random): Spline {
  const ideal = idealLine(track)
  const endM = (timedLaps + 2) * track.lengthM
  const count = Math.ceil(endM / KNOT_M) + 1
  const coarse = Array.from({ length: Math.ceil(count / VARIATION_KNOTS) + 2 }, () => spreadM * gaussian(random))
  const variation = naturalSpline(0, VARIATION_KNOTS * KNOT_M, coarse)
  const knots = Float64Array.from({ length: count }, (_, i) => {
    const stationM = i * KNOT_M
    const limit = REACH_M + 0.8
    const onTrack = Math.min(limit, Math.max(-limit, ideal[i % ideal.length]! + variation(stationM).value))
    const entry = endM - track.lengthM
    const inPit = Math.max(
      1 - ease((stationM - PIT_EXIT_M.fromM) / (PIT_EXIT_M.toM - PIT_EXIT_M.fromM)),
      ease((stationM - entry - PIT_ENTRY_M.fromM) / (PIT_ENTRY_M.toM - PIT_ENTRY_M.fromM)),
    )
    return onTrack + (PIT_OFFSET_M - onTrack) * inPit
  })
  return naturalSpline(0, KNOT_M, knots)
}

/** From 0 to 1 with no jump in the first two derivatives. */
function ease(x: number): number {
  const t = Math.min(1, Math.max(0, x))
  return t * t * t * (10 - 15 * t + 6 * t * t)
}
