import type { GlobePoint, Plane, PlanePoint } from './plane'
import { makePlane, pointToPlane, toDegrees, toPlane } from './plane'

/** A timing line in the plane. */
export interface FlatLine { a: PlanePoint, b: PlanePoint }

/** A timing line while it is being edited. The start/finish line has ordinal 0, sector lines count from 1. */
export interface DraftLine {
  /** Stays the same while the line is dragged and its ordinal changes. */
  key: string
  kind: 'start_finish' | 'sector'
  ordinal: number
  a: GlobePoint
  b: GlobePoint
}

/** The trace of a log as /api/logs/:id/trace answers it. */
export interface LogTrace {
  timeS: number[]
  latitudeDeg: number[]
  longitudeDeg: number[]
  gaps: { fromS: number, toS: number }[]
}

/** A trace in the plane, with the way driven up to each point. */
export interface FlatTrace {
  plane: Plane
  timeS: Float64Array
  xM: Float64Array
  yM: Float64Array
  wayM: Float64Array
}

/** A stretch of a trace along which station is told. */
export interface Loop {
  /** Way along the trace at which station is 0, and the length of the stretch, metres. */
  fromM: number
  lengthM: number
  /** One lap, from a line back to it; otherwise the whole trace from its first fix. */
  closed: boolean
}

/** A passage of the trace over a line. */
export interface Pass {
  wayM: number
  timeS: number
  /** 0 at end a of the line, 1 at end b. */
  share: number
  /** +1 when end a is on the driver's left, -1 when on the right. */
  side: 1 | -1
}

/** Passes of one line nearer than this along the trace are one passage: a car that waits on the line. */
const SAME_PASS_M = 60

/** Half the width of the line that is laid across the fastest point when a log has no line yet, metres. */
const SEARCH_HALF_M = 20

/** A loop is at least this long: shorter ones are turns in the paddock, metres. */
const SHORTEST_LOOP_M = 300

/**
 * Lay a trace into the tangent plane at its first point.
 * @returns null for a trace of fewer than two points. O(n).
 */
export function flattenTrace(trace: LogTrace): FlatTrace | null {
  const n = trace.timeS.length
  if (n < 2) return null
  const plane = makePlane(trace.latitudeDeg[0]!, trace.longitudeDeg[0]!)
  const { xM, yM } = toPlane(plane, trace.latitudeDeg, trace.longitudeDeg)
  const wayM = new Float64Array(n)
  for (let i = 1; i < n; i++) wayM[i] = wayM[i - 1]! + Math.hypot(xM[i]! - xM[i - 1]!, yM[i]! - yM[i - 1]!)
  return { plane, timeS: Float64Array.from(trace.timeS), xM, yM, wayM }
}

/** A line on the globe as it lies in the plane. */
export function flatLine(plane: Plane, line: { a: GlobePoint, b: GlobePoint }): FlatLine {
  return { a: pointToPlane(plane, line.a), b: pointToPlane(plane, line.b) }
}

/** A line in the plane as it lies on the globe: inverse of `flatLine`. */
export function globeLine(plane: Plane, { a, b }: FlatLine): { a: GlobePoint, b: GlobePoint } {
  return { a: toDegrees(plane, a.xM, a.yM), b: toDegrees(plane, b.xM, b.yM) }
}

/** Length of a line, metres. */
export function lineWidthM(line: FlatLine): number {
  return Math.hypot(line.b.xM - line.a.xM, line.b.yM - line.a.yM)
}

/** The point half-way between the ends of a line. */
export function lineMiddle(line: FlatLine): PlanePoint {
  return { xM: (line.a.xM + line.b.xM) / 2, yM: (line.a.yM + line.b.yM) / 2 }
}

/**
 * Every passage of the trace over the segment itself, never its extension, in the order driven. A passage that starts
 * on a sample is counted once. Good enough to show a station while a line is dragged; laps are timed by the server.
 * O(n).
 */
export function passesOf(trace: FlatTrace, line: FlatLine): Pass[] {
  const passes: Pass[] = []
  const ux = line.b.xM - line.a.xM
  const uy = line.b.yM - line.a.yM
  for (let i = 1; i < trace.xM.length; i++) {
    const px = trace.xM[i - 1]!
    const py = trace.yM[i - 1]!
    const dx = trace.xM[i]! - px
    const dy = trace.yM[i]! - py
    const cross = dx * uy - dy * ux
    if (cross === 0) continue
    const along = ((line.a.xM - px) * uy - (line.a.yM - py) * ux) / cross
    const share = ((line.a.xM - px) * dy - (line.a.yM - py) * dx) / cross
    if (along < 0 || along >= 1 || share < 0 || share > 1) continue
    const lerp = (of: Float64Array) => of[i - 1]! + along * (of[i]! - of[i - 1]!)
    passes.push({ wayM: lerp(trace.wayM), timeS: lerp(trace.timeS), share, side: cross < 0 ? 1 : -1 })
  }
  return passes
}

/** Passes in the direction of most of them, each passage once. */
function mainPasses(passes: Pass[]): Pass[] {
  const side = passes.reduce((sum, pass) => sum + pass.side, 0) < 0 ? -1 : 1
  const kept: Pass[] = []
  for (const pass of passes) {
    const last = kept.at(-1)
    if (pass.side === side && (!last || pass.wayM - last.wayM > SAME_PASS_M)) kept.push(pass)
  }
  return kept
}

/** Index of the fastest step of the trace, where a car is surely on the track. */
function fastestIndex(trace: FlatTrace): number {
  let best = 1
  let bestMps = -1
  for (let i = 1; i < trace.xM.length - 1; i++) {
    const mps = (trace.wayM[i + 1]! - trace.wayM[i - 1]!) / (trace.timeS[i + 1]! - trace.timeS[i - 1]!)
    if (mps > bestMps) [best, bestMps] = [i, mps]
  }
  return best
}

/**
 * The quickest lap of the trace, along which station is told: from the start/finish line when there is one that the
 * trace passes at least twice; else from where the car was fastest, if it came there again; else the whole trace.
 * O(n).
 */
export function bestLoop(trace: FlatTrace, startFinish: FlatLine | null): Loop {
  const whole: Loop = { fromM: 0, lengthM: trace.wayM.at(-1)!, closed: false }
  const across = startFinish ?? lineAt(trace, whole, trace.wayM[fastestIndex(trace)]!, 2 * SEARCH_HALF_M)
  const passes = mainPasses(passesOf(trace, across))
  let loop: Loop | null = null
  let bestS = Infinity
  for (let i = 1; i < passes.length; i++) {
    const timeS = passes[i]!.timeS - passes[i - 1]!.timeS
    const lengthM = passes[i]!.wayM - passes[i - 1]!.wayM
    if (timeS >= bestS || lengthM < SHORTEST_LOOP_M) continue
    bestS = timeS
    loop = { fromM: passes[i - 1]!.wayM, lengthM, closed: true }
  }
  return loop ?? (startFinish ? bestLoop(trace, null) : whole)
}

/** Where the trace is after so many metres of way: the first index at or beyond it. O(log n). */
function indexAt(wayM: Float64Array, atM: number): number {
  let low = 1
  let high = wayM.length - 1
  while (low < high) {
    const middle = (low + high) >> 1
    if (wayM[middle]! < atM) low = middle + 1
    else high = middle
  }
  return low
}

/** The point of the trace after so many metres of way, held at its ends. */
export function pointAtWay(trace: FlatTrace, atM: number): PlanePoint {
  const i = indexAt(trace.wayM, atM)
  const step = trace.wayM[i]! - trace.wayM[i - 1]!
  const share = step > 0 ? Math.min(1, Math.max(0, (atM - trace.wayM[i - 1]!) / step)) : 0
  const lerp = (of: Float64Array) => of[i - 1]! + share * (of[i]! - of[i - 1]!)
  return { xM: lerp(trace.xM), yM: lerp(trace.yM) }
}

/** Direction of the trace after so many metres of way, rad counter-clockwise from east, over 4 m before and after. */
export function headingAtWay(trace: FlatTrace, atM: number): number {
  const before = pointAtWay(trace, atM - 4)
  const after = pointAtWay(trace, atM + 4)
  return Math.atan2(after.yM - before.yM, after.xM - before.xM)
}

/** A line square to the trace at a station of the loop, end a on the driver's left. */
export function lineAt(trace: FlatTrace, loop: Loop, stationM: number, widthM: number): FlatLine {
  const wayM = loop.fromM + stationM
  const { xM, yM } = pointAtWay(trace, wayM)
  const headingRad = headingAtWay(trace, wayM)
  const dx = -Math.sin(headingRad) * widthM / 2
  const dy = Math.cos(headingRad) * widthM / 2
  return { a: { xM: xM + dx, yM: yM + dy }, b: { xM: xM - dx, yM: yM - dy } }
}

/**
 * The station of a line: where the loop passes it nearest to its middle; where it does not pass it, the point of the
 * loop nearest to the middle of the line. A closed loop's end is its station 0. O(n).
 */
export function stationOf(trace: FlatTrace, loop: Loop, line: FlatLine): number {
  const toM = loop.fromM + loop.lengthM
  const passes = passesOf(trace, line).filter(pass => pass.wayM >= loop.fromM - 0.01 && pass.wayM <= toM + 0.01)
  const central = passes.sort((p, q) => Math.abs(p.share - 0.5) - Math.abs(q.share - 0.5))[0]
  const stationM = (central?.wayM ?? nearestWay(trace, loop, lineMiddle(line))) - loop.fromM
  return loop.closed && loop.lengthM - stationM < 0.5 ? 0 : Math.max(0, stationM)
}

function nearestWay(trace: FlatTrace, loop: Loop, to: PlanePoint): number {
  const last = indexAt(trace.wayM, loop.fromM + loop.lengthM)
  let best = loop.fromM
  let bestM = Infinity
  for (let i = indexAt(trace.wayM, loop.fromM); i <= last; i++) {
    const awayM = Math.hypot(trace.xM[i]! - to.xM, trace.yM[i]! - to.yM)
    if (awayM < bestM) [best, bestM] = [trace.wayM[i]!, awayM]
  }
  return best
}

/** How far a line is from square to the way driven over it, degrees, 0 to 90. */
export function offSquareDeg(trace: FlatTrace, loop: Loop, line: FlatLine): number {
  const headingRad = headingAtWay(trace, loop.fromM + stationOf(trace, loop, line))
  const lineRad = Math.atan2(line.b.yM - line.a.yM, line.b.xM - line.a.xM)
  return Math.asin(Math.min(1, Math.abs(Math.cos(headingRad - lineRad)))) * 180 / Math.PI
}

/** A line moved as a whole, metres east and north. */
export function movedLine(line: FlatLine, eastM: number, northM: number): FlatLine {
  const move = (point: PlanePoint) => ({ xM: point.xM + eastM, yM: point.yM + northM })
  return { a: move(line.a), b: move(line.b) }
}

/** A line stretched about its middle. */
export function widenedLine(line: FlatLine, widthM: number): FlatLine {
  const middle = lineMiddle(line)
  const scale = widthM / (lineWidthM(line) || 1)
  const reach = (point: PlanePoint) => ({
    xM: middle.xM + (point.xM - middle.xM) * scale,
    yM: middle.yM + (point.yM - middle.yM) * scale,
  })
  return { a: reach(line.a), b: reach(line.b) }
}

/** The lines with the start/finish line first and the sector lines numbered in driving order. */
export function orderedLines(lines: readonly DraftLine[], stationM: (line: DraftLine) => number): DraftLine[] {
  const rank = (line: DraftLine) => line.kind === 'start_finish' ? -1 : stationM(line)
  const sorted = [...lines].sort((p, q) => rank(p) - rank(q))
  let sector = 0
  return sorted.map(line => ({ ...line, ordinal: line.kind === 'start_finish' ? 0 : ++sector }))
}

/**
 * Where to offer the next line: at the start of the loop when there is none yet, else in the middle of the longest
 * sector.
 * @param stationsM stations of the lines so far, in any order
 */
export function stationForNext(stationsM: readonly number[], lengthM: number): number {
  const marks = [...stationsM].sort((p, q) => p - q)
  let atM = 0
  let widestM = -1
  for (const [i, fromM] of marks.entries()) {
    const toM = marks[i + 1] ?? lengthM
    if (toM - fromM > widestM) [atM, widestM] = [(fromM + toM) / 2, toM - fromM]
  }
  return atM
}

/** 'Start and finish', 'Sector 1 ends', ... */
export function lineName(ordinal: number): string {
  return ordinal === 0 ? 'Start and finish' : `Sector ${ordinal} ends`
}

/** The round length nearest below a wish: 1, 2 or 5 times a power of ten. */
export function roundLengthM(wishM: number): number {
  const power = 10 ** Math.floor(Math.log10(wishM))
  const lead = wishM / power
  return (lead >= 5 ? 5 : lead >= 2 ? 2 : 1) * power
}
