import fc from 'fast-check'
import { Geodesic } from 'geographiclib-geodesic'
import { describe, expect, it } from 'vitest'
import { makePlane } from '../../../shared/plane'

const metres = fc.double({ min: -3000, max: 3000, noNaN: true })
const near = fc.record({ x: metres, y: metres })
const origin = fc.record({
  latitudeDeg: fc.double({ min: -85, max: 85, noNaN: true }),
  longitudeDeg: fc.double({ min: -180, max: 180, noNaN: true }),
})

describe('makePlane', () => {
  it('puts its origin at zero', () => {
    const here = { latitudeDeg: 54.4, longitudeDeg: -2.9 }
    const { xM, yM } = makePlane(here).flat(here)
    expect(Math.hypot(xM, yM)).toBe(0)
  })

  it('agrees with the geodesic of GeographicLib to 1 part in 10^6 within 5 km', () => {
    // Source: Karney (2013), geographiclib-geodesic. Chord and tilt of a tangent plane: (s / R)^2 / 6, 1e-7 at 5 km.
    fc.assert(fc.property(origin, near, (at, to) => {
      const plane = makePlane(at)
      const there = plane.globe({ xM: to.x, yM: to.y })
      const { s12 } = Geodesic.WGS84.Inverse(at.latitudeDeg, at.longitudeDeg, there.latitudeDeg, there.longitudeDeg)
      const flatM = Math.hypot(to.x, to.y)
      expect(Math.abs(s12! - flatM)).toBeLessThan(1e-6 * flatM + 1e-6)
    }))
  })

  it('comes back from the globe to the tenth of a millimetre, at the 180th meridian too', () => {
    fc.assert(fc.property(origin, near, (at, to) => {
      const plane = makePlane(at)
      const back = plane.flat(plane.globe({ xM: to.x, yM: to.y }))
      expect(Math.hypot(back.xM - to.x, back.yM - to.y)).toBeLessThan(1e-4)
    }))
  })

  it('keeps longitudes within half a turn', () => {
    const { longitudeDeg } = makePlane({ latitudeDeg: 0, longitudeDeg: 179.9999 }).globe({ xM: 100, yM: 0 })
    expect(longitudeDeg).toBeLessThan(-179.99)
  })
})
