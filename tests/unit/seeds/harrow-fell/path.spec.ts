import { describe, expect, it } from 'vitest'
import { outingLine } from '../../../../seeds/harrow-fell/line'
import { pathAt } from '../../../../seeds/harrow-fell/path'
import { makeRandom } from '../../../../seeds/harrow-fell/random'
import { naturalSpline } from '../../../../seeds/harrow-fell/spline'
import { makeTrack } from '../../../../seeds/harrow-fell/track'

const track = makeTrack()

describe('pathAt', () => {
  it('is the parallel curve for a constant offset: radius less the offset in a left-hand bend', () => {
    const left = track.corners.find(corner => corner.side === 'left')!
    const p = pathAt(track, naturalSpline(0, 1000, [2, 2, 2, 2, 2]), left.apexM)
    expect(1 / p.curvaturePerM).toBeCloseTo(left.radiusM - 2, 9)
    expect(p.stretch).toBeCloseTo(1 - 2 / left.radiusM, 12)
  })

  it('has stretch, heading and curvature of its own positions', () => {
    const line = outingLine(track, 1, 0.4, makeRandom(9))
    const h = 0.01
    for (let s = 250; s < 8000; s += 61.3) {
      const [a, m, b] = [-h, 0, h].map(d => pathAt(track, line, s + d))
      const [east, north] = [b!.eastM - a!.eastM, b!.northM - a!.northM]
      // Central differences err by h^2 / 6 of the third derivative (below 0.01 / m2): 2e-7.
      expect(m!.stretch).toBeCloseTo(Math.hypot(east, north) / (2 * h), 5)
      expect(Math.sin(m!.headingRad - Math.atan2(north, east))).toBeCloseTo(0, 5)
      const turn = b!.headingRad - a!.headingRad
      // Across an end of an easement the curvature's slope jumps by up to 1e-3 / m2, 1e-5 over the step.
      expect(m!.curvaturePerM).toBeCloseTo(Math.atan2(Math.sin(turn), Math.cos(turn)) / (2 * h * m!.stretch), 4)
    }
  })
})
