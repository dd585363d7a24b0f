import { describe, expect, it } from 'vitest'
import geodesic from 'geographiclib-geodesic'
import { LENGTH_M, LINE_HALF_WIDTH_M, makeTrack, ORIGIN, SECTOR_STATIONS_M } from '../../../../seeds/harrow-fell/track'

const track = makeTrack()
const wrapped = (rad: number) => Math.atan2(Math.sin(rad), Math.cos(rad))

describe('makeTrack', () => {
  it('turns once round, clockwise', () => {
    let turned = 0
    for (let s = 0; s < LENGTH_M; s++) {
      turned += wrapped(track.at(s + 1).headingRad - track.at(s).headingRad)
    }
    // 3104 roundings of about 4e-16.
    expect(turned).toBeCloseTo(-2 * Math.PI, 11)
  })

  it('is as long as it says, by the chords of a fine polygon', () => {
    const stepM = 0.02
    const count = Math.round(LENGTH_M / stepM)
    let sum = 0
    let a = track.at(0)
    for (let i = 1; i <= count; i++) {
      const b = track.at(i * stepM)
      sum += Math.hypot(b.eastM - a.eastM, b.northM - a.northM)
      a = b
    }
    // A chord of h on radius R is short by h^3 / 24 R^2: on 950 m of bends of 40 to 290 m by less than 1e-5 m in all.
    expect(sum).toBeLessThan(LENGTH_M)
    expect(LENGTH_M - sum).toBeLessThan(1e-5)
  })

  it('has the positions that its curvature implies, within a tenth of a millimetre', () => {
    // Integrated anew from the curvature alone: midpoint heading on steps of 25 mm.
    const stepM = 0.025
    let { eastM, northM, headingRad } = track.at(0)
    let worstM = 0
    for (let i = 0; i < LENGTH_M / stepM; i++) {
      const middle = headingRad + track.at((i + 0.25) * stepM).curvaturePerM * stepM / 2
      eastM += Math.cos(middle) * stepM
      northM += Math.sin(middle) * stepM
      headingRad += track.at((i + 0.5) * stepM).curvaturePerM * stepM
      const truth = track.at((i + 1) * stepM)
      worstM = Math.max(worstM, Math.hypot(truth.eastM - eastM, truth.northM - northM))
    }
    // A kink of the curvature inside a step turns the heading by up to k' h^2 / 8, 1.5e-7 rad, 44 times, a kilometre
    // away.
    expect(worstM).toBeLessThan(1e-4)
  })

  it('starts at the origin and takes stations modulo its length', () => {
    expect(track.at(0)).toMatchObject({ eastM: 0, northM: 0 })
    expect(track.at(-100).eastM).toBeCloseTo(track.at(LENGTH_M - 100).eastM, 9)
    expect(track.at(5 * LENGTH_M + 1234.5).northM).toBeCloseTo(track.at(1234.5).northM, 8)
  })

  it('has eleven corners in order, with the turns that their sides say', () => {
    expect(track.corners.map(corner => corner.number)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11])
    let before = 0
    for (const { fromM, toM, apexM, radiusM, side } of track.corners) {
      expect(fromM).toBeGreaterThan(before)
      expect(toM).toBeGreaterThan(fromM)
      before = toM
      expect(track.at(apexM).curvaturePerM).toBeCloseTo((side === 'left' ? 1 : -1) / radiusM, 12)
      expect(track.at(fromM - 0.01).curvaturePerM).toBe(0)
      expect(track.at(toM + 0.01).curvaturePerM).toBe(0)
    }
    expect(before).toBeLessThan(LENGTH_M)
  })

  it('puts the timing lines square across the centre line', () => {
    const wgs84 = geodesic.Geodesic.WGS84
    const stations = [0, ...SECTOR_STATIONS_M]
    expect(track.lines.map(line => line.ordinal)).toEqual([0, 1, 2])
    track.lines.forEach(({ a, b }, i) => {
      const p = track.at(stations[i]!)
      const centre = track.toDegrees(p.eastM, p.northM)
      for (const end of [a, b]) {
        const g = wgs84.Inverse(centre.latitudeDeg, centre.longitudeDeg, end.latitudeDeg, end.longitudeDeg)
        // Scale of the plane within 1.5 km: 3e-8 of 9 m.
        expect(Math.abs(g.s12! - LINE_HALF_WIDTH_M)).toBeLessThan(1e-6)
        const courseDeg = 90 - p.headingRad * 180 / Math.PI
        const across = wrapped((g.azi1! - courseDeg) * Math.PI / 180)
        // North of the plane and north of the place part by up to 2e-4 rad at 1 km (meridian convergence).
        expect(Math.abs(Math.abs(across) - Math.PI / 2)).toBeLessThan(3e-4)
      }
    })
    const middle = (x: number, y: number) => (x + y) / 2
    const [line] = track.lines
    expect(middle(line!.a.latitudeDeg, line!.b.latitudeDeg)).toBeCloseTo(ORIGIN.latitudeDeg, 9)
    expect(middle(line!.a.longitudeDeg, line!.b.longitudeDeg)).toBeCloseTo(ORIGIN.longitudeDeg, 9)
  })

  it('crosses its sector lines away from corners', () => {
    for (const s of [0, ...SECTOR_STATIONS_M]) {
      expect(track.at(s).curvaturePerM).toBe(0)
    }
  })
})
