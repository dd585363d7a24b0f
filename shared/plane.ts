/** Semi-major axis of WGS 84, metres (defining parameter, NGA.STND.0036). */
export const WGS84_A_M = 6378137
/** Inverse flattening of WGS 84 (defining parameter, NGA.STND.0036). */
export const WGS84_INVERSE_FLATTENING = 298.257223563

const FLATTENING = 1 / WGS84_INVERSE_FLATTENING
/** Square of the first eccentricity. */
export const WGS84_E2 = FLATTENING * (2 - FLATTENING)

const RAD = Math.PI / 180

/** A point on the globe, degrees on WGS 84. */
export interface GlobePoint { latitudeDeg: number, longitudeDeg: number }

/** A point in a plane, metres east and north of its origin. */
export interface PlanePoint { xM: number, yM: number }

/** A plane that touches the ellipsoid at a point: x to the east, y to the north, metres. */
export interface Plane {
  originLatitudeDeg: number
  originLongitudeDeg: number
  /** Sine and cosine of the origin's latitude. */
  sinLatitude: number
  cosLatitude: number
  /** The origin's distance from the earth's axis and its height over the equator's plane, metres. */
  axisM: number
  heightM: number
}

/**
 * The tangent plane at a point of the ellipsoid. One plane for both ends: laps are cut in it by the pipeline (this file
 * is its step from degrees to metres), and lines are drawn in it in the browser.
 * @throws {RangeError} when the latitude is not within +-90 degrees or a number is missing
 */
export function makePlane(originLatitudeDeg: number, originLongitudeDeg: number): Plane {
  if (!(Math.abs(originLatitudeDeg) <= 90) || !Number.isFinite(originLongitudeDeg)) {
    throw new RangeError(`latitude ${originLatitudeDeg}, longitude ${originLongitudeDeg} is no place on earth`)
  }
  const sinLatitude = Math.sin(originLatitudeDeg * RAD)
  const cosLatitude = Math.cos(originLatitudeDeg * RAD)
  const radiusM = WGS84_A_M / Math.sqrt(1 - WGS84_E2 * sinLatitude * sinLatitude)
  return {
    originLatitudeDeg,
    originLongitudeDeg,
    sinLatitude,
    cosLatitude,
    axisM: radiusM * cosLatitude,
    heightM: radiusM * (1 - WGS84_E2) * sinLatitude,
  }
}

/**
 * Degrees to metres in the plane: every point is put on the ellipsoid at zero height, in earth-centred coordinates, and
 * seen along the origin's vertical. Longitude enters as sine and cosine of its difference from the origin's, so that
 * neither the 180th meridian nor the hemispheres need a special case.
 *
 * Lengths come out a little short, the more so away from the origin. How much, as the worst of eight bearings, in parts
 * per 10^9 of the geodesic (npm geographiclib-geodesic 2.2.0): of the way from the origin / of a 100 m step there:
 *
 * | latitude | 0.5 km | 1 km | 2 km | 5 km |
 * | --- | --- | --- | --- | --- |
 * | 0 | 1 / 4 | 4 / 14 | 17 / 52 | 104 / 318 |
 * | 30 | 1 / 4 | 4 / 14 | 17 / 52 | 103 / 316 |
 * | 60 | 1 / 4 | 4 / 14 | 16 / 52 | 102 / 313 |
 * | 85 | 1 / 4 | 4 / 13 | 16 / 51 | 102 / 311 |
 *
 * @param latitudeDeg  length n, degrees, NaN = missing
 * @param longitudeDeg length n, degrees, NaN = missing
 * @returns east and north of the origin, length n, metres; NaN where either angle is missing
 * @throws {RangeError} when they differ in length
 * @see Snyder, Map Projections: A Working Manual (1987), chapter 20 (orthographic). O(n).
 */
export function toPlane(
  plane: Plane,
  latitudeDeg: ArrayLike<number>,
  longitudeDeg: ArrayLike<number>,
): { xM: Float64Array, yM: Float64Array } {
  const n = latitudeDeg.length
  if (longitudeDeg.length !== n) throw new RangeError(`${n} latitudes, but ${longitudeDeg.length} longitudes`)
  const xM = new Float64Array(n)
  const yM = new Float64Array(n)
  const { originLongitudeDeg, sinLatitude, cosLatitude, axisM, heightM } = plane
  for (let i = 0; i < n; i++) {
    const latitude = latitudeDeg[i]! * RAD
    const turn = (longitudeDeg[i]! - originLongitudeDeg) * RAD
    const sin = Math.sin(latitude)
    const radiusM = WGS84_A_M / Math.sqrt(1 - WGS84_E2 * sin * sin)
    const fromAxisM = radiusM * Math.cos(latitude)
    const overEquatorM = radiusM * (1 - WGS84_E2) * sin
    const east = fromAxisM * Math.sin(turn)
    const north = (overEquatorM - heightM) * cosLatitude - (fromAxisM * Math.cos(turn) - axisM) * sinLatitude
    // One missing angle leaves no place at all.
    xM[i] = Number.isNaN(north) ? Number.NaN : east
    yM[i] = Number.isNaN(east) ? Number.NaN : north
  }
  return { xM, yM }
}

/** One point in the plane, as `toPlane` does many. */
export function pointToPlane(plane: Plane, point: GlobePoint): PlanePoint {
  const { xM, yM } = toPlane(plane, [point.latitudeDeg], [point.longitudeDeg])
  return { xM: xM[0]!, yM: yM[0]! }
}

/**
 * Metres in the plane back to degrees: the point of the ellipsoid that lies under or over (x, y) along the origin's
 * vertical. Inverse of `toPlane` to about a micrometre within 5 km.
 * @returns longitude within -180 (included) and 180; NaN where a coordinate is missing or beyond the earth's edge.
 *   O(1).
 */
export function toDegrees(plane: Plane, xM: number, yM: number): GlobePoint {
  const { sinLatitude: sin, cosLatitude: cos, axisM, heightM } = plane
  // Where the vertical through (x, y) meets (p^2 + x^2) / a^2 + z^2 / b^2 = 1, a quadratic in the height u.
  const ratio = 1 / (1 - WGS84_E2)
  const p = axisM - yM * sin
  const z = heightM + yM * cos
  const square = cos * cos + sin * sin * ratio
  const half = p * cos + z * sin * ratio
  const rest = p * p + xM * xM + z * z * ratio - WGS84_A_M * WGS84_A_M
  const u = -rest / (half + Math.sqrt(half * half - square * rest))
  const alongM = p + u * cos
  const overM = z + u * sin
  const latitude = Math.atan2(overM * ratio, Math.hypot(alongM, xM))
  let longitudeDeg = plane.originLongitudeDeg + Math.atan2(xM, alongM) / RAD
  while (longitudeDeg >= 180) longitudeDeg -= 360
  while (longitudeDeg < -180) longitudeDeg += 360
  return { latitudeDeg: latitude / RAD, longitudeDeg }
}
