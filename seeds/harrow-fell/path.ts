import type { Spline } from './spline'
import type { Track } from './track'

/** A place on the driven path. */
export interface PathPoint {
  eastM: number
  northM: number
  headingRad: number
  /** Of the path itself, positive to the left, 1/m. */
  curvaturePerM: number
  /** Metres of path per metre of station. */
  stretch: number
}

/**
 * The driven path at a station: the centre line moved to the left by the offset, with tangent and curvature of the
 * moved curve in closed form.
 * With centre line C, unit normal N and offset n: P' = (1 - kappa n) T + n' N, and P'' from the Frenet formulas.
 * @see do Carmo, Differential Geometry of Curves and Surfaces, section 1-5
 */
export function pathAt(track: Track, offset: Spline, stationM: number): PathPoint {
  const c = track.at(stationM)
  const n = offset(stationM)
  const along = 1 - c.curvaturePerM * n.value
  const stretch = Math.hypot(along, n.first)
  const along2 = -c.curvatureSlopePerM2 * n.value - 2 * c.curvaturePerM * n.first
  const across2 = along * c.curvaturePerM + n.second
  return {
    eastM: c.eastM - Math.sin(c.headingRad) * n.value,
    northM: c.northM + Math.cos(c.headingRad) * n.value,
    headingRad: c.headingRad + Math.atan2(n.first, along),
    curvaturePerM: (along * across2 - n.first * along2) / stretch ** 3,
    stretch,
  }
}
