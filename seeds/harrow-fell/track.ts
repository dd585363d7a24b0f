import { makeToDegrees, type Degrees, type ToDegrees } from './geodesy'

/** Length of the centre line of Harrow Fell, metres; the drawing is scaled to it. */
export const LENGTH_M = 3104
/** Start/finish point: a place on open moor that belongs to nothing. */
export const ORIGIN: Degrees = { latitudeDeg: 54.402, longitudeDeg: -2.913 }
/** Stations of the sector lines: behind corner 5 and behind corner 9, where cars are at full throttle. */
export const SECTOR_STATIONS_M = [970, 2000] as const
/** Timing lines reach this far to either side of the centre line: past the kerbs, not as far as the pit lane. */
export const LINE_HALF_WIDTH_M = 9
/** Half the width of the asphalt. */
export const HALF_WIDTH_M = 5.5

/** A timing line of the circuit, as the pipeline takes it. */
export interface TrackLine {
  id: string
  kind: 'start_finish' | 'sector'
  ordinal: number
  a: Degrees
  b: Degrees
}

/** Centre line at a station. East and north from the start/finish point; heading counter-clockwise from east. */
export interface CentrePoint {
  eastM: number
  northM: number
  headingRad: number
  /** Positive in a left-hand bend, 1/m. */
  curvaturePerM: number
  /** Rate of change of the curvature along the line, 1/m2. */
  curvatureSlopePerM2: number
}

export interface TrackCorner {
  number: number
  /** Stations where the easement in begins and the easement out ends. */
  fromM: number
  toM: number
  apexM: number
  radiusM: number
  side: 'left' | 'right'
}

export interface Track {
  lengthM: number
  corners: TrackCorner[]
  /** @param stationM any number; taken modulo the length */
  at: (stationM: number) => CentrePoint
  toDegrees: ToDegrees
  lines: TrackLine[]
}

/** Curvature runs straight from `k0` to `k1`: a straight, an arc, or the easement (clothoid) between them. */
interface Piece {
  startM: number
  lengthM: number
  eastM: number
  northM: number
  headingRad: number
  k0: number
  k1: number
}

// The drawing: vertices (east, north), radius of the arc, wanted length of the easements, all before scaling.
const VERTICES = [
  [262, -26, 54, 22],
  [224, 84, 46, 18],
  [112, 122, 44, 18],
  [112, 244, 130, 26],
  [212, 430, 33, 20],
  [350, 272, 62, 24],
  [610, 392, 240, 30],
  [905, 420, 58, 24],
  [930, 292, 44, 18],
  [1118, 252, 54, 22],
  [1020, -14, 76, 26],
] as const
/** From the end of the last corner to the start/finish line, metres on the scaled track. */
const RUN_TO_LINE_M = 575

// Gauss-Legendre, 8 points on [-1, 1] (Abramowitz and Stegun, table 25.4). An easement turns by less than 0.6 rad, for
// which the rule is exact to rounding.
const NODES = [0.1834346424956498, 0.5255324099163290, 0.7966664774136267, 0.9602898564975363]
const WEIGHTS = [0.3626837833783620, 0.3137066458778873, 0.2223810344533745, 0.1012285362903763]

/**
 * Harrow Fell, an invented circuit: eleven corners, driven clockwise. Straights, arcs and easements in closed form or
 * by quadrature to rounding, so that positions and lengths are exact to far less than a millimetre.
 */
export function makeTrack(): Track {
  const unit = lay(1)
  const scale = LENGTH_M / unit.totalM
  const { pieces, corners } = lay(scale)
  const shiftM = RUN_TO_LINE_M
  const origin = locate(pieces, shiftM)
  const at = (stationM: number): CentrePoint => {
    const p = locate(pieces, modulo(stationM + shiftM, LENGTH_M))
    return { ...p, eastM: p.eastM - origin.eastM, northM: p.northM - origin.northM }
  }
  const toDegrees = makeToDegrees(ORIGIN)
  return {
    lengthM: LENGTH_M,
    corners: corners.map(corner => moved(corner, -shiftM)),
    at,
    toDegrees,
    lines: [0, ...SECTOR_STATIONS_M].map((stationM, ordinal) => timingLine(at(stationM), toDegrees, ordinal)),
  }
}

function moved(corner: TrackCorner, byM: number): TrackCorner {
  const [fromM, apexM, toM] = [corner.fromM, corner.apexM, corner.toM].map(s => modulo(s + byM, LENGTH_M))
  return { ...corner, fromM: fromM!, apexM: apexM!, toM: toM! }
}

/** A timing line square across the centre line at a point of it. */
export function timingLine(p: CentrePoint, toDegrees: ToDegrees, ordinal: number): TrackLine {
  const [acrossE, acrossN] = [-Math.sin(p.headingRad), Math.cos(p.headingRad)]
  const end = (leftM: number) => toDegrees(p.eastM + acrossE * leftM, p.northM + acrossN * leftM)
  return {
    id: ordinal === 0 ? 'start-finish' : `sector-${ordinal}`,
    kind: ordinal === 0 ? 'start_finish' : 'sector',
    ordinal,
    a: end(LINE_HALF_WIDTH_M),
    b: end(-LINE_HALF_WIDTH_M),
  }
}

/** One corner of the drawing with its easements: curvature, lengths, and how far before the vertex it begins. */
function shapeCorner(turnRad: number, radiusM: number, wantedEaseM: number) {
  const easeM = Math.min(wantedEaseM, 0.7 * Math.abs(turnRad) * radiusM)
  const arcM = Math.abs(turnRad) * radiusM - easeM
  const k = Math.sign(turnRad) / radiusM
  const pieces = chain({ eastM: 0, northM: 0, headingRad: 0 }, 0, [[easeM, 0, k], [arcM, k, k], [easeM, k, 0]])
  const end = pieceAt(pieces[2]!, easeM)
  return { k, easeM, arcM, tangentM: end.northM / Math.sin(turnRad) }
}

/** Lay the pieces from the exit of the last corner round to it again. */
function lay(scale: number): { pieces: Piece[], corners: TrackCorner[], totalM: number } {
  const vertices = VERTICES.map(v => v.map(value => value * scale))
  const count = vertices.length
  const bearing = (i: number) => {
    const [a, b] = [vertices[(i + count) % count]!, vertices[(i + 1) % count]!]
    return { headingRad: Math.atan2(b[1]! - a[1]!, b[0]! - a[0]!), lengthM: Math.hypot(b[0]! - a[0]!, b[1]! - a[1]!) }
  }
  const shapes = vertices.map(([, , radiusM, easeM], i) => {
    const turn = bearing(i).headingRad - bearing(i - 1).headingRad
    return shapeCorner(Math.atan2(Math.sin(turn), Math.cos(turn)), radiusM!, easeM!)
  })
  const last = vertices[count - 1]!
  const home = bearing(count - 1).headingRad
  const out = shapes[count - 1]!.tangentM
  const start = { eastM: last[0]! + Math.cos(home) * out, northM: last[1]! + Math.sin(home) * out, headingRad: home }
  const steps: [number, number, number][] = []
  const corners: TrackCorner[] = []
  let stationM = 0
  shapes.forEach(({ k, easeM, arcM, tangentM }, i) => {
    const straightM = bearing(i - 1).lengthM - shapes[(i + count - 1) % count]!.tangentM - tangentM
    if (straightM < 0) {
      throw new RangeError(`corner ${i + 1} begins before the one before it ends`)
    }
    steps.push([straightM, 0, 0], [easeM, 0, k], [arcM, k, k], [easeM, k, 0])
    const fromM = stationM + straightM
    const toM = fromM + easeM + arcM + easeM
    corners.push({ number: i + 1, fromM, toM, apexM: (fromM + toM) / 2, radiusM: 1 / Math.abs(k), side: k > 0 ? 'left' : 'right' })
    stationM = toM
  })
  return { pieces: chain(start, 0, steps), corners, totalM: stationM }
}

function chain(from: Pick<Piece, 'eastM' | 'northM' | 'headingRad'>, startM: number, steps: [number, number, number][]): Piece[] {
  let end = from
  let stationM = startM
  return steps.map(([lengthM, k0, k1]) => {
    const { eastM, northM, headingRad } = end
    const piece = { startM: stationM, lengthM, eastM, northM, headingRad, k0, k1 }
    end = pieceAt(piece, lengthM)
    stationM += lengthM
    return piece
  })
}

function locate(pieces: Piece[], stationM: number): CentrePoint {
  let low = 0
  let high = pieces.length - 1
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (pieces[middle]!.startM <= stationM) {
      low = middle
    }
    else {
      high = middle - 1
    }
  }
  return pieceAt(pieces[low]!, stationM - pieces[low]!.startM)
}

function pieceAt(piece: Piece, alongM: number): CentrePoint {
  const { lengthM, eastM, northM, headingRad, k0, k1 } = piece
  const slope = lengthM > 0 ? (k1 - k0) / lengthM : 0
  const heading = (d: number) => headingRad + d * (k0 + slope * d / 2)
  let [east, north] = [0, 0]
  if (k0 === k1) {
    // The chord of an arc; a straight is an arc that does not turn.
    const half = k0 * alongM / 2
    const chordM = half === 0 ? alongM : alongM * Math.sin(half) / half
    east = chordM * Math.cos(headingRad + half)
    north = chordM * Math.sin(headingRad + half)
  }
  else {
    for (let i = 0; i < NODES.length; i++) {
      for (const x of [NODES[i]!, -NODES[i]!]) {
        const psi = heading(alongM * (1 + x) / 2)
        east += WEIGHTS[i]! * Math.cos(psi) * alongM / 2
        north += WEIGHTS[i]! * Math.sin(psi) * alongM / 2
      }
    }
  }
  return {
    eastM: eastM + east,
    northM: northM + north,
    headingRad: heading(alongM),
    curvaturePerM: k0 + slope * alongM,
    curvatureSlopePerM2: slope,
  }
}

function modulo(value: number, by: number): number {
  const rest = value % by
  return rest < 0 ? rest + by : rest
}
