/** A point on the globe, degrees on WGS 84. */
export interface GlobePoint { latitudeDeg: number, longitudeDeg: number }

/** A point in a local plane: metres east and north of its origin. */
export interface PlanePoint { xM: number, yM: number }

export interface Plane {
  /** Globe to plane. */
  flat: (point: GlobePoint) => PlanePoint
  /** Plane to globe. */
  globe: (point: PlanePoint) => GlobePoint
}

// WGS 84, NIMA TR8350.2: semi-major axis and flattening.
const A_M = 6378137
const F = 1 / 298.257223563
const E2 = F * (2 - F)
const RAD = Math.PI / 180

function earthCentred(point: GlobePoint): [number, number, number] {
  const latitude = point.latitudeDeg * RAD
  const longitude = point.longitudeDeg * RAD
  const n = A_M / Math.sqrt(1 - E2 * Math.sin(latitude) ** 2)
  return [
    n * Math.cos(latitude) * Math.cos(longitude),
    n * Math.cos(latitude) * Math.sin(longitude),
    n * (1 - E2) * Math.sin(latitude),
  ]
}

/** Longitude within -180 to 180, whatever way round the globe it was counted. */
function wrapDeg(longitudeDeg: number): number {
  return longitudeDeg > 180 ? longitudeDeg - 360 : longitudeDeg < -180 ? longitudeDeg + 360 : longitudeDeg
}

/**
 * The tangent plane at a point, through earth-centred coordinates on the WGS 84 ellipsoid at zero height, for drawing
 * and moving timing lines. `globe` is the inverse of `flat` by Newton's method, to better than a millimetre within
 * 20 km.
 * @see https://en.wikipedia.org/wiki/Geographic_coordinate_conversion (ECEF to ENU)
 */
export function makePlane(origin: GlobePoint): Plane {
  const [x0, y0, z0] = earthCentred(origin)
  const sinLat = Math.sin(origin.latitudeDeg * RAD)
  const cosLat = Math.cos(origin.latitudeDeg * RAD)
  const sinLon = Math.sin(origin.longitudeDeg * RAD)
  const cosLon = Math.cos(origin.longitudeDeg * RAD)
  const w2 = 1 - E2 * sinLat ** 2
  const northMPerDeg = A_M * (1 - E2) / w2 ** 1.5 * RAD
  const eastMPerDeg = A_M / Math.sqrt(w2) * cosLat * RAD

  function flat(point: GlobePoint): PlanePoint {
    const [x, y, z] = earthCentred(point)
    const [dx, dy, dz] = [x - x0, y - y0, z - z0]
    return {
      xM: -sinLon * dx + cosLon * dy,
      yM: -sinLat * cosLon * dx - sinLat * sinLon * dy + cosLat * dz,
    }
  }

  function globe(point: PlanePoint): GlobePoint {
    let latitudeDeg = origin.latitudeDeg + point.yM / northMPerDeg
    let longitudeDeg = origin.longitudeDeg + point.xM / eastMPerDeg
    for (let round = 0; round < 4; round++) {
      const at = flat({ latitudeDeg, longitudeDeg })
      latitudeDeg += (point.yM - at.yM) / northMPerDeg
      longitudeDeg += (point.xM - at.xM) / eastMPerDeg
    }
    return { latitudeDeg, longitudeDeg: wrapDeg(longitudeDeg) }
  }

  return { flat, globe }
}
