import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import geographiclib from 'geographiclib-geodesic'
import { describe, expect, it } from 'vitest'
import { makePlane, pointToPlane, toDegrees, toPlane, WGS84_A_M, WGS84_E2, WGS84_INVERSE_FLATTENING } from '../../../shared/plane'
import type { GlobePoint, Plane } from '../../../shared/plane'

const geodesic = geographiclib.Geodesic.WGS84
const TABLE_KM = [0.5, 1, 2, 5]

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true })

function place(latitudeDeg: number, longitudeDeg: number, bearingDeg: number, distanceM: number): GlobePoint {
  const { lat2, lon2 } = geodesic.Direct(latitudeDeg, longitudeDeg, bearingDeg, distanceM)
  return { latitudeDeg: lat2!, longitudeDeg: lon2! }
}

/** Distance in the plane between two places. */
function inPlane(plane: Plane, p: GlobePoint, q: GlobePoint): number {
  const { xM, yM } = toPlane(plane, [p.latitudeDeg, q.latitudeDeg], [p.longitudeDeg, q.longitudeDeg])
  return Math.hypot(xM[1]! - xM[0]!, yM[1]! - yM[0]!)
}

describe('constants', () => {
  it('are those of WGS 84', () => {
    // GeographicLib, Constants.hpp (C. F. F. Karney): a = 6378137 m, 1/f = 298.257223563; derived constants of WGS 84
    // as published and computed again: b = 6356752.314245179 m, e^2 = 0.0066943799901413165. Tolerance: rounding.
    expect(WGS84_A_M).toBe(6378137)
    expect(WGS84_A_M * (1 - 1 / WGS84_INVERSE_FLATTENING)).toBeCloseTo(6356752.314245179, 6)
    expect(WGS84_E2).toBeCloseTo(0.0066943799901413165, 15)
  })
})

describe('toPlane against published geodesics', () => {
  // GeodTest.dat, test set for geodesics by C. F. F. Karney (first short lines): lat1, lat2, lon2 (lon1 = 0), s12,
  // azi1.
  // As printed, in more digits than a double holds.
  const lines: [number, string, string, number, number][] = [
    [18.725775553796, '18.724785210853172866', '0.006615636046166963', 706.2676803, 98.927919777265],
    [47.900780879363, '47.899309788344023215', '0.001327005894209747', 191.3088022, 148.758779524609],
    [2.514600234503, '2.506446532968658234', '0.00196695535966103', 927.7647972, 166.362139719401],
    [60.077425015363, '60.078197903525388982', '0.010531670881733178', 592.5766309, 81.639916890942],
    [36.800966049655, '36.802889529289609993', '0.002261122427425817', 293.7372273, 43.389649034063],
    [56.310719132311, '56.304258387808388716', '0.005380024608319352', 792.7231052, 155.158323803365],
    [8.849455388939, '8.843107684651578467', '0.007694428892432052', 1099.6867173, 129.673344478389],
    [11.898997917427, '11.899065303345823952', '0.000257501685735042', 29.0265121, 75.119044134969],
  ]
  it.each(lines)('from latitude %f', (lat1, lat2, lon2, s12, azi1) => {
    const { xM, yM } = toPlane(makePlane(lat1, 0), [Number(lat2)], [Number(lon2)])
    // The plane is short by (d / R)^2 / 6: 5e-9 at 1.1 km; the printed length is rounded to 1e-7 m.
    expect(Math.abs(Math.hypot(xM[0]!, yM[0]!) / s12 - 1)).toBeLessThan(1e-8)
    // A bearing differs by less than (d / R)^2: 2e-6 degrees.
    expect(Math.atan2(xM[0]!, yM[0]!) * 180 / Math.PI).toBeCloseTo(azi1, 5)
  })

  it('a line of 4.8 km along a parallel', () => {
    // Geoscience Australia, GeodePy tests/test_geodesy.py: 4831.553 m (GRS 80, which differs from WGS 84 by 1e-10).
    const { xM, yM } = toPlane(makePlane(-29.85, 140.71666666666667), [-29.85], [140.76666666666668])
    expect(Math.hypot(xM[0]!, yM[0]!)).toBeCloseTo(4831.553, 2)
  })
})

describe('toPlane against geographiclib-geodesic', () => {
  it('agrees within 5 km to better than one in a million, anywhere, also across the 180th meridian', () => {
    const latitudes = between(-89.9, 89.9)
    const longitudes = fc.oneof(between(-180, 180), between(179.96, 180))
    const ways = fc.tuple(between(0, 360), between(1, 5000))
    fc.assert(fc.property(latitudes, longitudes, ways, ways, (lat, lon, toP, toQ) => {
      const p = place(lat, lon, ...toP)
      const q = place(lat, lon, ...toQ)
      const { s12 } = geodesic.Inverse(p.latitudeDeg, p.longitudeDeg, q.latitudeDeg, q.longitudeDeg)
      // 10 nm beside the relative bound, for the library's own rounding on short lines.
      expect(Math.abs(inPlane(makePlane(lat, lon), p, q) - s12!)).toBeLessThan(1e-6 * s12! + 1e-8)
    }))
  })

  it('east is east and north is north on both sides of the 180th meridian', () => {
    const { xM, yM } = toPlane(makePlane(-17, 179.9999), [-17, -17, -16.9999], [-179.9999, 179.9998, 179.9999])
    expect(xM[0]).toBeGreaterThan(21)
    expect(xM[1]).toBeLessThan(-10)
    expect(yM[2]).toBeGreaterThan(11)
  })

  it('the table in the docstring is what the code gives', () => {
    const source = readFileSync(new URL('../../../shared/plane.ts', import.meta.url), 'utf8')
    for (const lat of [0, 30, 60, 85]) {
      const plane = makePlane(lat, 10)
      const origin = { latitudeDeg: lat, longitudeDeg: 10 }
      const cells = TABLE_KM.map((km) => {
        const parts = [0, 0]
        for (let bearing = 0; bearing < 360; bearing += 45) {
          const p = place(lat, 10, bearing, km * 1000)
          const q = place(lat, 10, bearing, km * 1000 + 100)
          parts[0] = Math.max(parts[0]!, Math.abs(inPlane(plane, origin, p) / (km * 1000) - 1))
          parts[1] = Math.max(parts[1]!, Math.abs(inPlane(plane, p, q) / 100 - 1))
        }
        return parts.map(part => Math.round(part * 1e9)).join(' / ')
      })
      expect(source).toContain(` * | ${lat} | ${cells.join(' | ')} |`)
    }
  })
})

describe('pointToPlane', () => {
  it('puts a point where toPlane puts it', () => {
    const plane = makePlane(54.4, -2.9)
    const { xM, yM } = toPlane(plane, [54.41], [-2.91])
    expect(pointToPlane(plane, { latitudeDeg: 54.41, longitudeDeg: -2.91 })).toEqual({ xM: xM[0], yM: yM[0] })
  })
})

describe('toDegrees', () => {
  it('is the inverse of toPlane', () => {
    const metres = between(-5000, 5000)
    fc.assert(fc.property(between(-89, 89), between(-180, 180), metres, metres, (lat, lon, x, y) => {
      const plane = makePlane(lat, lon)
      const { latitudeDeg, longitudeDeg } = toDegrees(plane, x, y)
      expect(longitudeDeg).toBeGreaterThanOrEqual(-180)
      expect(longitudeDeg).toBeLessThan(180)
      const { xM, yM } = toPlane(plane, [latitudeDeg], [longitudeDeg])
      // A degree of 180 is known to 3e-14: 3 nm on the ground; the root adds as much.
      expect(Math.hypot(xM[0]! - x, yM[0]! - y)).toBeLessThan(1e-7)
    }))
  })

  it('keeps longitudes within half a turn', () => {
    expect(toDegrees(makePlane(0, 179.9999), 100, 0).longitudeDeg).toBeLessThan(-179.99)
    expect(toDegrees(makePlane(0, -179.9999), -100, 0).longitudeDeg).toBeGreaterThan(179.99)
  })

  it('knows no place beyond the edge of the earth', () => {
    expect(toDegrees(makePlane(0, 0), 1.001 * WGS84_A_M, 0).latitudeDeg).toBeNaN()
  })
})

describe('what is missing or wrong', () => {
  it('one missing angle leaves no place', () => {
    const { xM, yM } = toPlane(makePlane(50, 0), [Number.NaN, 50, 50], [0, Number.NaN, 0])
    expect([xM[0], yM[0], xM[1], yM[1]]).toEqual([Number.NaN, Number.NaN, Number.NaN, Number.NaN])
    // The same point: only a finite answer can be asked of its bearing.
    expect(Math.hypot(xM[2]!, yM[2]!)).toBeLessThan(1e-8)
  })

  it('refuses an origin that is nowhere, and columns of different length', () => {
    expect(() => makePlane(91, 0)).toThrow(RangeError)
    expect(() => makePlane(Number.NaN, 0)).toThrow(RangeError)
    expect(() => toPlane(makePlane(0, 0), [1, 2], [1])).toThrow(RangeError)
  })
})
