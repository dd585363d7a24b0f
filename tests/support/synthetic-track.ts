/**
 * Closed tracks of straights and arcs, driven at constant speed or in phases of constant acceleration: everything about
 * them is known in closed form. No figures from the project's own code come in here but the degrees of a plane.
 */
import type { Gap } from '../../server/utils/laps/hermite'
import { makePlane, toDegrees } from '../../shared/plane'
import type { Plane } from '../../shared/plane'
import type { TimingLine } from '../../server/utils/laps/types'

export interface Piece { lengthM: number, curvature1pm: number }
export interface Phase { lengthM: number, accelMps2: number }
export interface Track { pieces: Piece[], lengthM: number, startX: number, startY: number, startHeadingRad: number }
export interface Point { x: number, y: number }
export interface PlanePoint extends Point { headingRad: number }

export function track(pieces: Piece[], startX = 0, startY = 0, startHeadingRad = 0): Track {
  return { pieces, lengthM: pieces.reduce((sum, piece) => sum + piece.lengthM, 0), startX, startY, startHeadingRad }
}

/**
 * Anticlockwise: two straights to the east and back, two half circles. Station 0 in the middle of the southern
 * straight.
 */
export function oval(straightM: number, radiusM: number): Track {
  const bend = { lengthM: Math.PI * radiusM, curvature1pm: 1 / radiusM }
  const half = { lengthM: straightM / 2, curvature1pm: 0 }
  return track([half, bend, { lengthM: straightM, curvature1pm: 0 }, bend, half])
}

/**
 * Two circles that touch, the first driven to the left, the second to the right; station 0 where they touch, heading
 * east.
 */
export function figureOfEight(radiusM: number): Track {
  const round = 2 * Math.PI * radiusM
  return track([{ lengthM: round, curvature1pm: 1 / radiusM }, { lengthM: round, curvature1pm: -1 / radiusM }])
}

/** The same track driven the other way round. */
export function reversed(way: Track): Track {
  const pieces = [...way.pieces].reverse().map(piece => ({ ...piece, curvature1pm: -piece.curvature1pm }))
  return { ...way, pieces, startHeadingRad: way.startHeadingRad + Math.PI }
}

export function pointAt(way: Track, stationM: number): PlanePoint {
  let rest = stationM - Math.floor(stationM / way.lengthM) * way.lengthM
  let { startX: x, startY: y, startHeadingRad: headingRad } = way
  for (const { lengthM, curvature1pm: k } of way.pieces) {
    const s = Math.min(rest, lengthM)
    if (k === 0) {
      x += s * Math.cos(headingRad)
      y += s * Math.sin(headingRad)
    }
    else {
      x += (Math.sin(headingRad + k * s) - Math.sin(headingRad)) / k
      y -= (Math.cos(headingRad + k * s) - Math.cos(headingRad)) / k
    }
    headingRad += k * s
    rest -= s
    if (rest <= 0) break
  }
  return { x, y, headingRad }
}

/**
 * Time and station of one lap's phases; the phases repeat every lap and must come back to the speed they began with.
 */
export function drive(phases: Phase[], startSpeedMps: number) {
  const knots = [{ t: 0, s: 0, v: startSpeedMps }]
  for (const { lengthM, accelMps2: a } of phases) {
    const { t, s, v } = knots.at(-1)!
    const to = Math.sqrt(v * v + 2 * a * lengthM)
    knots.push({ t: t + 2 * lengthM / (v + to), s: s + lengthM, v: to })
  }
  const lap = knots.at(-1)!
  const within = (value: number, of: 't' | 's') => {
    let k = 0
    while (k + 2 < knots.length && knots[k + 1]![of] <= value) k++
    return k
  }
  return {
    lapTimeS: lap.t,
    lapM: lap.s,
    /** Station since time 0, over all laps. */
    stationAt(t: number): number {
      const laps = Math.floor(t / lap.t)
      const k = within(t - laps * lap.t, 't')
      const since = t - laps * lap.t - knots[k]!.t
      return laps * lap.s + knots[k]!.s + knots[k]!.v * since + phases[k]!.accelMps2 * since * since / 2
    },
    speedAt(t: number): number {
      const laps = Math.floor(t / lap.t)
      const k = within(t - laps * lap.t, 't')
      return knots[k]!.v + phases[k]!.accelMps2 * (t - laps * lap.t - knots[k]!.t)
    },
    /** Time at which a station is reached. */
    timeAt(s: number): number {
      const laps = Math.floor(s / lap.s)
      const k = within(s - laps * lap.s, 's')
      const on = s - laps * lap.s - knots[k]!.s
      const { v, t } = knots[k]!
      return laps * lap.t + t + 2 * on / (v + Math.sqrt(v * v + 2 * phases[k]!.accelMps2 * on))
    },
  }
}

/** Somewhere in the hills of an invented county. */
export const HARROW_FELL: Plane = makePlane(54.4, -2.9)

/** Samples in the plane as a log in degrees. */
export function asLog(timeS: number[], points: Point[], plane = HARROW_FELL, gaps: Gap[] = []) {
  const degrees = points.map(point => toDegrees(plane, point.x, point.y))
  return {
    timeS: Float64Array.from(timeS),
    latitudeDeg: Float64Array.from(degrees, point => point.latitudeDeg),
    longitudeDeg: Float64Array.from(degrees, point => point.longitudeDeg),
    gaps,
  }
}

/** Times from `fromS` to `toS` at a rate. */
export function times(fromS: number, toS: number, rateHz: number): number[] {
  return Array.from({ length: Math.floor((toS - fromS) * rateHz + 1e-9) + 1 }, (_, k) => fromS + k / rateHz)
}

/** A line square across the track at a station, from `leftM` left of the middle to `rightM` right of it. */
export function lineAcross(way: Track, stationM: number, leftM = 10, rightM = 10): { a: PlanePoint, b: PlanePoint } {
  const { x, y, headingRad } = pointAt(way, stationM)
  const aside = (d: number) => ({ x: x - d * Math.sin(headingRad), y: y + d * Math.cos(headingRad), headingRad })
  return { a: aside(leftM), b: aside(-rightM) }
}

export function timingLine(ordinal: number, ends: { a: Point, b: Point }, plane = HARROW_FELL): TimingLine {
  return {
    id: `line-${ordinal}`,
    kind: ordinal === 0 ? 'start_finish' : 'sector',
    ordinal,
    a: toDegrees(plane, ends.a.x, ends.a.y),
    b: toDegrees(plane, ends.b.x, ends.b.y),
  }
}
