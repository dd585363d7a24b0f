import { describe, expect, it } from 'vitest'
import { driverLimits, outingSpan, type OutingSpec } from '../../../../seeds/harrow-fell/driver'
import { makeRandom } from '../../../../seeds/harrow-fell/random'
import { makeTrack } from '../../../../seeds/harrow-fell/track'

const track = makeTrack()
const spec: OutingSpec = {
  timedLaps: 5,
  setup: { slow: 1, fast: 1, traction: 1, braking: 1 },
  dayGrip: 1,
  fuelL: 20,
  traffic: { lap: 3, fromM: 1000, toM: 1200, share: 0.8 },
  line: 'driven',
}
const limits = driverLimits(track, spec, makeRandom(1))
const { fromM, nodes } = outingSpan(track, spec.timedLaps)
const meanOf = (values: Float64Array, lap: number) => {
  const startM = lap * track.lengthM - fromM
  const part = values.slice(Math.max(0, startM), Math.min(nodes, startM + track.lengthM))
  return part.reduce((a, b) => a + b, 0) / part.length
}

describe('outingSpan', () => {
  it('passes the line once more than there are timed laps', () => {
    const lastM = fromM + nodes - 1
    expect(fromM).toBeGreaterThan(0)
    expect(Math.floor(lastM / track.lengthM)).toBe(spec.timedLaps + 1)
    expect(lastM).toBeLessThan((spec.timedLaps + 2) * track.lengthM)
  })
})

describe('driverLimits', () => {
  it('takes it easier on the out lap and the in lap, and warms up', () => {
    const lap = [0, 1, 2, 3, 4, 5, 6].map(n => meanOf(limits.lateral, n))
    expect(lap[0]).toBeLessThan(0.9 * lap[3]!)
    expect(lap[6]).toBeLessThan(0.9 * lap[3]!)
    expect(lap[1]).toBeLessThan(lap[2]! + 0.005)
    expect(lap[1]).toBeLessThan(lap[4]!)
  })

  it('varies between laps and between corners', () => {
    const at = (lap: number, stationM: number) => limits.lateral[lap * track.lengthM + stationM - fromM]!
    expect(at(2, 250)).not.toBe(at(3, 250))
    expect(at(2, 250)).not.toBe(at(2, 900))
  })

  it('meets the slower car on its own lap only', () => {
    const slowed = [...limits.speedShare].flatMap((share, i) => share < 1 ? [fromM + i] : [])
    expect(slowed[0]).toBe(3 * track.lengthM + 1000)
    expect(slowed).toHaveLength(200)
  })

  it('keeps the pit lane\'s limit at both ends', () => {
    expect(limits.speedCapMps[0]).toBeLessThanOrEqual(60 / 3.6)
    expect(limits.speedCapMps[nodes - 1]).toBeLessThanOrEqual(60 / 3.6)
    expect(limits.speedCapMps[1000]).toBe(Infinity)
  })
})
