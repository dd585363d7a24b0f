import { describe, expect, it } from 'vitest'
import { loopSense, startSense } from '../../../../../server/utils/laps/direction'
import type { Pass } from '../../../../../server/utils/laps/passes'
import { figureOfEight, oval, pointAt, reversed } from '../../../../support/synthetic-track'
import type { Track } from '../../../../support/synthetic-track'

function points(way: Track, laps = 1) {
  const all = Array.from({ length: Math.round(laps * 200) + 1 }, (_, k) => pointAt(way, k / 200 * way.lengthM))
  return { xM: all.map(({ x }) => x), yM: all.map(({ y }) => y) }
}

/** Crossings at the start of every lap of 200 samples. */
function crossings(way: Track, laps: number, sense: 1 | -1): Pass[] {
  return Array.from({ length: laps + 1 }, (_, k) => (
    { distanceM: k * way.lengthM, timeS: k * 60, sense, offsetM: 0, gap: 'none', offSquareDeg: 0, sample: k * 200 }
  ))
}

describe('loopSense', () => {
  const track = oval(300, 40)
  it('is + anticlockwise and - clockwise', () => {
    const { xM, yM } = points(track)
    expect(loopSense(xM, yM, 0, 200, track.lengthM)).toBe(1)
    const back = points(reversed(track))
    expect(loopSense(back.xM, back.yM, 0, 200, track.lengthM)).toBe(-1)
  })

  it('a figure of eight goes neither way round', () => {
    const eight = figureOfEight(50)
    const { xM, yM } = points(eight)
    expect(loopSense(xM, yM, 0, 200, eight.lengthM)).toBe(0)
  })
})

describe('startSense', () => {
  const track = oval(300, 40)
  it.each([1, -1] as const)('without a direction is the usual one (%i)', (sense) => {
    expect(startSense(crossings(track, 3, sense), points(track, 4), null)).toEqual({ sense, lapM: track.lengthM })
  })

  it('with the direction of the loops is theirs, with the other none', () => {
    const path = points(track, 4)
    expect(startSense(crossings(track, 3, -1), path, 'anticlockwise').sense).toBe(-1)
    expect(startSense(crossings(track, 3, -1), path, 'clockwise').sense).toBeNull()
  })

  it('believes a figure of eight, and a log without a complete lap', () => {
    const eight = figureOfEight(50)
    expect(startSense(crossings(eight, 3, 1), points(eight, 4), 'clockwise').sense).toBe(1)
    expect(startSense(crossings(track, 0, 1), points(track, 1), 'clockwise').sense).toBe(1)
  })
})
