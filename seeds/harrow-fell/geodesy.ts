/** A place in degrees on WGS 84, at zero height. */
export interface Degrees {
  latitudeDeg: number
  longitudeDeg: number
}

/** Turns metres east and north of an origin, in the tangent plane there, into degrees. */
export type ToDegrees = (eastM: number, northM: number) => Degrees

// The two defining constants of WGS 84 (NGA.STND.0036, table 3.1) and what follows from them.
const SEMI_MAJOR_M = 6378137
const FLATTENING = 1 / 298.257223563
const ECCENTRICITY_SQUARED = FLATTENING * (2 - FLATTENING)
const RAD = Math.PI / 180

/**
 * The way back from the tangent plane to the ellipsoid, in closed form: the perpendicular of the plane through
 * (east, north) is cut with the ellipsoid of zero height, which is a quadratic equation.
 * Written apart from the plane of the log pipeline on purpose, so that the simulated truth does not lean on it.
 * @throws {RangeError} when called further out than the ellipsoid reaches
 */
export function makeToDegrees(origin: Degrees): ToDegrees {
  const lat = origin.latitudeDeg * RAD
  const lon = origin.longitudeDeg * RAD
  const [sinLat, cosLat, sinLon, cosLon] = [Math.sin(lat), Math.cos(lat), Math.sin(lon), Math.cos(lon)]
  const normalM = SEMI_MAJOR_M / Math.sqrt(1 - ECCENTRICITY_SQUARED * sinLat * sinLat)
  // The polar axis is stretched by 1 / (1 - f), which turns the ellipsoid into a sphere of the equator's radius.
  const stretch = 1 / (1 - FLATTENING)
  const place = [normalM * cosLat * cosLon, normalM * cosLat * sinLon, normalM * (1 - ECCENTRICITY_SQUARED) * sinLat]
  const east = [-sinLon, cosLon, 0]
  const north = [-sinLat * cosLon, -sinLat * sinLon, cosLat]
  const up = [cosLat * cosLon, cosLat * sinLon, sinLat]
  const upSquared = up[0]! ** 2 + up[1]! ** 2 + (up[2]! * stretch) ** 2

  return (eastM, northM) => {
    const q = [0, 1, 2].map(i => east[i]! * eastM + north[i]! * northM)
    const p = [0, 1, 2].map(i => place[i]! + q[i]!)
    const half = p[0]! * up[0]! + p[1]! * up[1]! + p[2]! * up[2]! * stretch * stretch
    // |place + q|^2 - a^2 without the cancellation: the origin itself lies on the ellipsoid.
    const over = 2 * (place[0]! * q[0]! + place[1]! * q[1]! + place[2]! * q[2]! * stretch * stretch)
      + q[0]! ** 2 + q[1]! ** 2 + (q[2]! * stretch) ** 2
    const discriminant = half * half - upSquared * over
    if (!(discriminant >= 0)) {
      throw new RangeError(`no place on the ellipsoid lies under ${eastM}, ${northM} m`)
    }
    const upM = -over / (half + Math.sqrt(discriminant))
    const x = p[0]! + up[0]! * upM
    const y = p[1]! + up[1]! * upM
    const z = p[2]! + up[2]! * upM
    return {
      latitudeDeg: Math.atan2(z, (1 - ECCENTRICITY_SQUARED) * Math.hypot(x, y)) / RAD,
      longitudeDeg: Math.atan2(y, x) / RAD,
    }
  }
}
