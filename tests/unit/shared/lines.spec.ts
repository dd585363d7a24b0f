import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { DraftLine, FlatLine, FlatTrace } from '../../../shared/lines'
import { bestLoop, flatLine, flattenTrace, globeLine, lineAt, lineMiddle, lineName, lineWidthM, movedLine, offSquareDeg, orderedLines, passesOf, pointAtWay, roundLengthM, stationForNext, stationOf, widenedLine } from '../../../shared/lines'
import { makePlane, toDegrees } from '../../../shared/plane'

const ORIGIN = { latitudeDeg: 54.4, longitudeDeg: -2.9 }
const RADIUS_M = 200
const ROUND_M = 2 * Math.PI * RADIUS_M

/**
 * Laps of a circle of 200 m, counter-clockwise from its eastmost point, 2 m a sample. The second lap is the quickest; a
 * polygon of 2 m sides is shorter than its circle by (2 m / 200 m)^2 / 24 = 4 parts in 10^6, so metres hold to 0.05.
 */
function circleTrace(laps = 3.2): FlatTrace {
  const plane = makePlane(ORIGIN.latitudeDeg, ORIGIN.longitudeDeg)
  const timeS: number[] = []
  const latitudeDeg: number[] = []
  const longitudeDeg: number[] = []
  let nowS = 0
  for (let wayM = 0; wayM <= laps * ROUND_M; wayM += 2) {
    const angle = wayM / RADIUS_M
    const point = toDegrees(plane, RADIUS_M * Math.cos(angle), RADIUS_M * Math.sin(angle))
    timeS.push(nowS)
    latitudeDeg.push(point.latitudeDeg)
    longitudeDeg.push(point.longitudeDeg)
    nowS += 2 / (wayM > ROUND_M && wayM < 2 * ROUND_M ? 40 : 30)
  }
  return flattenTrace({ timeS, latitudeDeg, longitudeDeg, gaps: [] })!
}

/** A line across the circle at an angle, in the plane of the trace (whose origin is the circle's eastmost point). */
function spoke(angle: number, widthM = 20): FlatLine {
  const at = (r: number) => ({ xM: r * Math.cos(angle) - RADIUS_M, yM: r * Math.sin(angle) })
  return { a: at(RADIUS_M - widthM / 2), b: at(RADIUS_M + widthM / 2) }
}

describe('flattenTrace', () => {
  it('measures the way along the trace', () => {
    expect(circleTrace(1).wayM.at(-1)).toBeCloseTo(2 * Math.floor(ROUND_M / 2), 1)
  })

  it('has nothing to lay flat in a single point', () => {
    expect(flattenTrace({ timeS: [0], latitudeDeg: [1], longitudeDeg: [1], gaps: [] })).toBeNull()
  })
})

describe('flatLine and globeLine', () => {
  it('are the inverse of each other, and keep the ends apart', () => {
    const line = spoke(1)
    const back = flatLine(makePlane(54.4, -2.9), globeLine(makePlane(54.4, -2.9), line))
    // A degree of 54 is known to 7e-15: below a nanometre on the ground.
    for (const end of ['a', 'b'] as const) {
      expect(Math.hypot(back[end].xM - line[end].xM, back[end].yM - line[end].yM)).toBeLessThan(1e-7)
    }
  })
})

describe('passesOf', () => {
  it('finds each passage of a spoke, with its place and side', () => {
    const passes = passesOf(circleTrace(), spoke(1))
    expect(passes).toHaveLength(4)
    for (const [i, pass] of passes.entries()) {
      expect(Math.abs(pass.wayM - (RADIUS_M + i * ROUND_M))).toBeLessThan(0.05)
      expect(pass.share).toBeCloseTo(0.5, 2)
      // Counter-clockwise, the centre and so end a is on the driver's left.
      expect(pass.side).toBe(1)
    }
  })

  it('counts the segment and never its extension', () => {
    const outside = { a: { xM: 10, yM: 0.5 }, b: { xM: 40, yM: 0.5 } }
    expect(passesOf(circleTrace(), outside)).toEqual([])
  })
})

describe('bestLoop', () => {
  it('is the quickest lap between passes of the start/finish line', () => {
    const loop = bestLoop(circleTrace(), spoke(0.001))
    expect(loop.closed).toBe(true)
    expect(Math.abs(loop.fromM - (0.2 + ROUND_M))).toBeLessThan(0.05)
    expect(Math.abs(loop.lengthM - ROUND_M)).toBeLessThan(0.05)
  })

  it('is found without a line where the car came round again', () => {
    expect(Math.abs(bestLoop(circleTrace(), null).lengthM - ROUND_M)).toBeLessThan(0.05)
  })

  it('is the whole trace when it never comes round', () => {
    const trace = circleTrace(0.7)
    expect(bestLoop(trace, null)).toEqual({ fromM: 0, lengthM: trace.wayM.at(-1), closed: false })
  })

  it('does not depend on a line that was drawn beside the track', () => {
    const beside = { a: { xM: 50, yM: 0 }, b: { xM: 70, yM: 0 } }
    expect(bestLoop(circleTrace(), beside)).toEqual(bestLoop(circleTrace(), null))
  })
})

describe('lineAt and stationOf', () => {
  const trace = circleTrace()
  const loop = bestLoop(trace, spoke(0.001))

  it('are the inverse of each other, and the line is square and as wide as asked', () => {
    const station = fc.double({ min: 1, max: ROUND_M - 2, noNaN: true })
    const width = fc.double({ min: 4, max: 60, noNaN: true })
    fc.assert(fc.property(station, width, (stationM, widthM) => {
      const line = lineAt(trace, loop, stationM, widthM)
      expect(Math.abs(stationOf(trace, loop, line) - stationM)).toBeLessThan(0.05)
      expect(Math.abs(lineWidthM(line) - widthM)).toBeLessThan(1e-9)
      expect(offSquareDeg(trace, loop, line)).toBeLessThan(0.01)
      expect(passesOf(trace, line)[0]!.side).toBe(1)
    }))
  })

  it('calls the end of the loop its start', () => {
    expect(stationOf(trace, loop, lineAt(trace, loop, loop.lengthM - 0.1, 20))).toBe(0)
  })

  it('take the nearest point for a line that is not passed', () => {
    const line = movedLine(lineAt(trace, loop, 200, 6), 8 * Math.cos(1), 8 * Math.sin(1))
    expect(passesOf(trace, line)).toEqual([])
    // Nearest sample, and they are 2 m apart.
    expect(Math.abs(stationOf(trace, loop, line) - 200)).toBeLessThan(2)
  })

  it('tell how far from square a line is', () => {
    const line = lineAt(trace, loop, 300, 20)
    const middle = lineMiddle(line)
    const turn = (p: { xM: number, yM: number }) => ({
      xM: middle.xM + (p.xM - middle.xM) * Math.cos(0.2) - (p.yM - middle.yM) * Math.sin(0.2),
      yM: middle.yM + (p.xM - middle.xM) * Math.sin(0.2) + (p.yM - middle.yM) * Math.cos(0.2),
    })
    expect(offSquareDeg(trace, loop, { a: turn(line.a), b: turn(line.b) })).toBeCloseTo(0.2 * 180 / Math.PI, 1)
  })
})

describe('pointAtWay', () => {
  it('holds the ends of the trace', () => {
    const trace = circleTrace()
    expect(pointAtWay(trace, -5)).toEqual({ xM: trace.xM[0], yM: trace.yM[0] })
    expect(pointAtWay(trace, 1e6)).toEqual({ xM: trace.xM.at(-1), yM: trace.yM.at(-1) })
  })
})

describe('widenedLine', () => {
  it('keeps the middle and changes the width', () => {
    const line = spoke(2, 20)
    const wide = widenedLine(line, 30)
    expect(lineWidthM(wide)).toBeCloseTo(30, 9)
    expect(lineMiddle(wide).xM).toBeCloseTo(lineMiddle(line).xM, 9)
  })
})

describe('orderedLines', () => {
  it('numbers sector lines as they are driven, whatever order they were drawn in', () => {
    const place = { latitudeDeg: 0, longitudeDeg: 0 }
    const line = (key: string, kind: DraftLine['kind']): DraftLine => ({ key, kind, ordinal: 9, a: place, b: place })
    const stations: Record<string, number> = { late: 1935, start: 3000, early: 895 }
    const ordered = orderedLines([line('late', 'sector'), line('start', 'start_finish'), line('early', 'sector')], l => stations[l.key]!)
    expect(ordered.map(l => [l.key, l.ordinal])).toEqual([['start', 0], ['early', 1], ['late', 2]])
  })
})

describe('stationForNext', () => {
  it('is the start at first, then the middle of the longest sector', () => {
    expect(stationForNext([], 3000)).toBe(0)
    expect(stationForNext([0], 3000)).toBe(1500)
    expect(stationForNext([1000, 0], 3000)).toBe(2000)
    expect(stationForNext([0, 2000], 3000)).toBe(1000)
  })
})

describe('lineName and roundLengthM', () => {
  it('say what a line is', () => {
    expect([0, 1, 2].map(lineName)).toEqual(['Start and finish', 'Sector 1 ends', 'Sector 2 ends'])
  })

  it('round down to 1, 2 or 5', () => {
    expect([99, 100, 260, 730, 0.3].map(roundLengthM)).toEqual([50, 100, 200, 500, 0.2])
  })
})
