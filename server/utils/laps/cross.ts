import { LapsError } from './errors'
import { cubicAt, cubicSlope, hermite, threePointSlope } from './hermite'
import type { Cubic } from './hermite'

/** A timing line in the plane, metres. */
export interface PlaneLine { ax: number, ay: number, bx: number, by: number }

export interface Crossing {
  /** The instant, on the log's own clock. */
  timeS: number
  /** +1 from the right of the line (seen from a to b) to its left, -1 the other way. */
  sense: 1 | -1
  /** Between the path and the line's normal, 0 to 90 degrees; NaN where the path stands still. */
  offSquareDeg: number
  /** From the line's middle, positive towards b, metres. */
  offsetM: number
  /** Whether it lies in a gap, and whether the path on both sides agrees with what is assumed inside it. */
  gap: 'none' | 'agrees' | 'disagrees'
  /** The sample before it; the crossing lies between this one and the next. */
  sample: number
}

/**
 * How far the way over a gap may differ from what speed and heading at both its ends say: 2 m and a quarter of the
 * way.
 */
const GAP_SLACK_M = 2
const GAP_SLACK = 0.25

const DEG = 180 / Math.PI

/**
 * The one root of a cubic between two places where its sign differs: Newton's steps, halved where they leave the
 * bracket.
 */
function rootBetween(cubic: Cubic, from: number, to: number): number {
  const rising = cubicAt(cubic, from) < 0
  let low = from
  let high = to
  let u = (low + high) / 2
  for (let step = 0; step < 80 && high - low > 1e-16; step++) {
    const value = cubicAt(cubic, u)
    if (value === 0) return u
    if ((value < 0) === rising) low = u
    else high = u
    const newton = u - value / cubicSlope(cubic, u)
    const next = newton > low && newton < high ? newton : (low + high) / 2
    if (next === u) break
    u = next
  }
  return u
}

/**
 * Where a cubic changes sign within [0, 1]. Zero counts as positive, so that a sample that lies on the line belongs to
 * one side, and the stretches before and after it do not both report it.
 */
function signChanges(cubic: Cubic, last: number): { u: number, sense: 1 | -1 }[] {
  const [first, c1, c2, c3] = cubic
  const cuts = [0]
  const discriminant = c2 * c2 - 3 * c3 * c1
  if (discriminant > 0) {
    const q = -(c2 + Math.sign(c2 || 1) * Math.sqrt(discriminant))
    cuts.push(...[q / (3 * c3), c1 / q].filter(u => u > 0 && u < 1).sort((a, b) => a - b))
  }
  cuts.push(1)
  const changes: { u: number, sense: 1 | -1 }[] = []
  for (let k = 1; k < cuts.length; k++) {
    // The ends are taken from the samples themselves, so that neighbouring stretches judge a sample alike.
    const from = k === 1 ? first : cubicAt(cubic, cuts[k - 1]!)
    const to = k === cuts.length - 1 ? last : cubicAt(cubic, cuts[k]!)
    if ((from >= 0) !== (to >= 0)) {
      changes.push({ u: rootBetween(cubic, cuts[k - 1]!, cuts[k]!), sense: to >= 0 ? 1 : -1 })
    }
  }
  return changes
}

/** Same-sign hull of a stretch: no point of the curve can lie on the other side of zero. */
function oneSided(p0: number, m0: number, p1: number, m1: number): boolean {
  const q0 = p0 + m0 / 3
  const q1 = p1 - m1 / 3
  return p0 >= 0 ? q0 >= 0 && q1 >= 0 && p1 >= 0 : q0 < 0 && q1 < 0 && p1 < 0
}

/**
 * Does the way over a gap agree with constant acceleration from the velocity before it to the one after it? All are
 * displacements: the way itself, and velocity times the duration of the gap at its edges.
 */
export function gapAgrees(dx: number, dy: number, m0x: number, m0y: number, m1x: number, m1y: number): boolean {
  const offM = Math.hypot(dx - (m0x + m1x) / 2, dy - (m0y + m1y) / 2)
  return offM <= GAP_SLACK_M + GAP_SLACK * Math.max(Math.hypot(m0x, m0y), Math.hypot(m1x, m1y))
}

/** The line's own axes: along it from its first end, and to its left. */
interface Frame { originX: number, originY: number, ux: number, uy: number, lengthM: number }

interface Path {
  timeS: ArrayLike<number>
  xM: ArrayLike<number>
  yM: ArrayLike<number>
  vx: ArrayLike<number>
  vy: ArrayLike<number>
}

/** The crossings between sample i and the next, put behind those in `out`. */
function crossStretch(path: Path, i: number, inGap: boolean, frame: Frame, out: Crossing[]): void {
  const { originX, originY, ux, uy, lengthM } = frame
  const h = path.timeS[i + 1]! - path.timeS[i]!
  const x0 = path.xM[i]! - originX
  const y0 = path.yM[i]! - originY
  const x1 = path.xM[i + 1]! - originX
  const y1 = path.yM[i + 1]! - originY
  let m0x = path.vx[i]! * h
  let m0y = path.vy[i]! * h
  let m1x = path.vx[i + 1]! * h
  let m1y = path.vy[i + 1]! * h
  let gap: Crossing['gap'] = 'none'
  if (inGap) {
    gap = gapAgrees(x1 - x0, y1 - y0, m0x, m0y, m1x, m1y) ? 'agrees' : 'disagrees'
    if (gap === 'disagrees') {
      m0x = m1x = x1 - x0
      m0y = m1y = y1 - y0
    }
  }
  const s0 = y0 * ux - x0 * uy
  const s1 = y1 * ux - x1 * uy
  const ms0 = m0y * ux - m0x * uy
  const ms1 = m1y * ux - m1x * uy
  if (oneSided(s0, ms0, s1, ms1)) return
  const normal = hermite(s0, ms0, s1, ms1)
  const along = hermite(x0 * ux + y0 * uy, m0x * ux + m0y * uy, x1 * ux + y1 * uy, m1x * ux + m1y * uy)
  for (const { u, sense } of signChanges(normal, s1)) {
    const alongM = cubicAt(along, u)
    if (alongM < 0 || alongM > lengthM) continue
    const across = Math.abs(cubicSlope(normal, u))
    const sideways = Math.abs(cubicSlope(along, u))
    const offSquareDeg = across + sideways > 0 ? Math.atan2(sideways, across) * DEG : Number.NaN
    out.push({ timeS: path.timeS[i]! + u * h, sense, offSquareDeg, offsetM: alongM - lengthM / 2, gap, sample: i })
  }
}

/** A path that touches the line in one sample and turns back has been reported once each way: neither counts. */
function withoutTouches(crossings: Crossing[]): Crossing[] {
  const kept: Crossing[] = []
  for (const crossing of crossings) {
    const previous = kept.at(-1)
    if (previous && previous.sense !== crossing.sense && crossing.timeS - previous.timeS < 1e-6) kept.pop()
    else kept.push(crossing)
  }
  return kept
}

/**
 * The instants at which a path passes a line, on the line itself and never on its extension.
 *
 * Between samples the path is the cubic Hermite curve through position and velocity, and the instant is the root of its
 * distance from the line: exact for constant acceleration on a straight. With velocities from three-point differences
 * the curve is off by at most 0.016 h^3 times the third derivative (25 Hz, 40 m/s, 0.5 rad/s: 0.01 mm; 1 Hz, 20 m/s,
 * 0.4 rad/s: 5 cm), and by about a h^2 / 16 where an acceleration a sets in (25 Hz, 1 g: 1 mm; 1 Hz: 0.6 m). A path
 * that stands on the line gives as many crossings as its noise makes; what counts is decided elsewhere.
 *
 * @param timeS strictly rising, length n, seconds
 * @param xM length n, metres, no missing values
 * @param yM length n, metres, no missing values
 * @param vxMps velocity, length n, or null for three-point differences
 * @param vyMps likewise
 * @param gapAfter as `gapAfterSample` gives it, null = no gaps
 * @returns in order of time
 * @throws {LapsError} 'line_without_length'
 * @see de Boor, A Practical Guide to Splines, chapter IV (piecewise cubic Hermite). O(n).
 */
export function findCrossings(
  timeS: ArrayLike<number>,
  xM: ArrayLike<number>,
  yM: ArrayLike<number>,
  vxMps: ArrayLike<number> | null,
  vyMps: ArrayLike<number> | null,
  line: PlaneLine,
  gapAfter: Uint8Array | null = null,
): Crossing[] {
  const lengthM = Math.hypot(line.bx - line.ax, line.by - line.ay)
  if (!(lengthM > 0)) throw new LapsError('line_without_length', 'both ends of the timing line are the same point')
  const frame = {
    originX: line.ax,
    originY: line.ay,
    ux: (line.bx - line.ax) / lengthM,
    uy: (line.by - line.ay) / lengthM,
    lengthM,
  }
  const marks = gapAfter ?? new Uint8Array(timeS.length)
  const vx = vxMps ?? threePointSlope(timeS, xM, marks)
  const vy = vyMps ?? threePointSlope(timeS, yM, marks)
  const path = { timeS, xM, yM, vx, vy }
  const crossings: Crossing[] = []
  for (let i = 0; i + 1 < timeS.length; i++) crossStretch(path, i, marks[i] === 1, frame, crossings)
  return withoutTouches(crossings)
}
