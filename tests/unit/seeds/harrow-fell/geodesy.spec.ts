import { describe, expect, it } from 'vitest'
import geodesic from 'geographiclib-geodesic'
import { makeToDegrees } from '../../../../seeds/harrow-fell/geodesy'
import { ORIGIN } from '../../../../seeds/harrow-fell/track'
import { makePlane, toPlane } from '../../../../shared/plane'

// GeographicLib, C. F. F. Karney: geodesics on WGS 84 to 15 nm.
const wgs84 = geodesic.Geodesic.WGS84
const origins = [
  ORIGIN,
  { latitudeDeg: 0, longitudeDeg: 180 },
  { latitudeDeg: -37.5, longitudeDeg: -179.9999 },
  { latitudeDeg: 69, longitudeDeg: 20 },
]
const places = [[0, 0], [9, -3], [250, 400], [-620, 80], [1200, -900], [-1500, -20]] as const

describe('makeToDegrees', () => {
  it.each(origins)('agrees with the geodesic in distance and bearing around %o', (origin) => {
    const toDegrees = makeToDegrees(origin)
    for (const [eastM, northM] of places.slice(1)) {
      const p = toDegrees(eastM, northM)
      const g = wgs84.Inverse(origin.latitudeDeg, origin.longitudeDeg, p.latitudeDeg, p.longitudeDeg)
      // The plane's foot of a perpendicular is short by d^3 / 6 R^2, 14 micrometres at 1.5 km.
      expect(Math.abs(g.s12! - Math.hypot(eastM, northM))).toBeLessThan(2e-5)
      const off = (g.azi1! - Math.atan2(eastM, northM) * 180 / Math.PI + 540) % 360 - 180
      // Geodesic and vertical section part by less than 1e-7 rad within a few kilometres: 0.1 mm across at 1.5 km.
      expect(Math.abs(off) * Math.PI / 180 * g.s12!).toBeLessThan(1e-4)
    }
  })

  it('keeps short distances anywhere within the circuit', () => {
    const toDegrees = makeToDegrees(ORIGIN)
    for (const [eastM, northM] of places) {
      const [a, b] = [toDegrees(eastM, northM), toDegrees(eastM + 3, northM + 4)]
      const g = wgs84.Inverse(a.latitudeDeg, a.longitudeDeg, b.latitudeDeg, b.longitudeDeg)
      // Scale is off by at most d^2 / 2 R^2, 3e-8 at 1.5 km; the geodesic itself is good to 15 nm.
      expect(Math.abs(g.s12! - 5)).toBeLessThan(2e-7)
    }
  })

  it.each(origins)('is undone by the plane of the pipeline around %o', (origin) => {
    const toDegrees = makeToDegrees(origin)
    const plane = makePlane(origin.latitudeDeg, origin.longitudeDeg)
    for (const [eastM, northM] of places) {
      const { latitudeDeg, longitudeDeg } = toDegrees(eastM, northM)
      const { xM, yM } = toPlane(plane, [latitudeDeg], [longitudeDeg])
      // Half a unit in the last place of 180 degrees is 1.4e-14 degrees, 2 nm; three roundings of that size each way.
      expect(Math.abs(xM[0]! - eastM)).toBeLessThan(2e-8)
      expect(Math.abs(yM[0]! - northM)).toBeLessThan(2e-8)
    }
  })

  it('refuses a place beyond the edge of the earth', () => {
    expect(() => makeToDegrees(ORIGIN)(7e6, 0)).toThrow(RangeError)
  })
})
