import { PIT_ENTRY_M, PIT_EXIT_M, START_M, STOP_SHORT_M } from './line'
import { gaussian, type Random } from './random'
import type { SetupGrip } from './grip'
import type { Track } from './track'

export interface Traffic {
  /** Number of the timed lap, from 1. */
  lap: number
  /** Stations between which a slower car is ahead. */
  fromM: number
  toM: number
  /** Its speed as a share of one's own. */
  share: number
}

/** What an outing is driven with. */
export interface OutingSpec {
  timedLaps: number
  setup: SetupGrip
  /** Grip of the day: 1 on the first; goes with weather and rubber. */
  dayGrip: number
  fuelL: number
  traffic: Traffic | null
  /** Centre line: no fast line, no variation and no pit lane; for checks against the circuit's own geometry. */
  line: 'driven' | 'centre'
}

/** Limits that the driver keeps at every metre of station from the first node on. */
export interface DriverLimits {
  /** Lateral grip in g, share of the car's braking, of its traction and of its power. */
  lateral: Float64Array
  braking: Float64Array
  traction: Float64Array
  power: Float64Array
  /** Absolute speed limit, m/s (pit lane, in lap), and share of the speed that would be possible (traffic). */
  speedCapMps: Float64Array
  speedShare: Float64Array
  /** Metres that the foot is off the throttle before the brake. */
  coastM: Float64Array
}

/** Nell's own way with the eleven corners: share of grip used, of braking used, metres of coasting. Invented habits. */
const HABITS: readonly { lateral: number, braking: number, coastM: number }[] = [
  { lateral: 0.975, braking: 0.96, coastM: 5 },
  { lateral: 0.98, braking: 0.97, coastM: 4 },
  { lateral: 0.975, braking: 0.98, coastM: 3 },
  { lateral: 0.97, braking: 0.95, coastM: 8 },
  { lateral: 0.945, braking: 0.93, coastM: 9 },
  { lateral: 0.985, braking: 0.98, coastM: 4 },
  { lateral: 0.965, braking: 0.95, coastM: 10 },
  { lateral: 0.98, braking: 0.95, coastM: 6 },
  { lateral: 0.985, braking: 0.98, coastM: 3 },
  { lateral: 0.96, braking: 0.96, coastM: 8 },
  { lateral: 0.975, braking: 0.94, coastM: 7 },
]
const PIT_LIMIT_MPS = 60 / 3.6 - 0.4
/** An in lap is driven no faster than this, from well behind the line on, so that the lap before it is driven out. */
const IN_LAP_MPS = 38
const LIFT_OFF_M = 120
/** Bends tighter than this count as slow, wider than twice this as fast. */
const SLOW_RADIUS_M = 60

/** Stations of the first and last node: one metre apart, from the head of the pit lane to its foot. */
export function outingSpan(track: Track, timedLaps: number): { fromM: number, nodes: number } {
  return { fromM: START_M, nodes: (timedLaps + 2) * track.lengthM - STOP_SHORT_M - START_M + 1 }
}

/**
 * The driver through a whole outing: an out lap at reduced pace, tyres that come up to temperature over the first laps
 * and fade slowly, good and bad laps, good and bad corners, now and then a mistake, a slower car where the plan has
 * one, and an in lap that saves brakes.
 */
export function driverLimits(track: Track, spec: OutingSpec, random: Random): DriverLimits {
  const { fromM, nodes } = outingSpan(track, spec.timedLaps)
  const make = (value: number) => new Float64Array(nodes).fill(value)
  const limits: DriverLimits = {
    lateral: make(1), braking: make(1), traction: make(1), power: make(1),
    speedCapMps: make(Infinity), speedShare: make(1), coastM: make(0),
  }
  const owner = cornerByMetre(track)
  for (let lap = 0; lap <= spec.timedLaps + 1; lap++) {
    const pace = lapPace(lap, spec, random)
    const visits = track.corners.map(({ number, radiusM }) => {
      return visit(radiusM, HABITS[number - 1]!, pace, spec.setup, random)
    })
    const first = Math.max(0, lap * track.lengthM - fromM)
    const last = Math.min(nodes, (lap + 1) * track.lengthM - fromM)
    for (let i = first; i < last; i++) {
      const v = visits[owner[(fromM + i) % track.lengthM]!]!
      limits.lateral[i] = v.lateral
      limits.braking[i] = v.braking
      limits.traction[i] = v.traction
      limits.coastM[i] = v.coastM
      limits.power[i] = pace.power
    }
  }
  capSpeeds(limits, track, spec)
  return limits
}

interface Pace { grip: number, braking: number, power: number }

function lapPace(lap: number, spec: OutingSpec, random: Random): Pace {
  const form = 1 + 0.0035 * gaussian(random)
  if (lap === 0) {
    return { grip: 0.8 * form, braking: 0.72, power: 0.72 }
  }
  if (lap > spec.timedLaps) {
    return { grip: 0.72 * form, braking: 0.65, power: 0.6 }
  }
  const warm = 1 - 0.022 * Math.exp(-(lap - 1) / 0.9) - 0.0009 * Math.max(0, lap - 5)
  return { grip: spec.dayGrip * warm * form, braking: 1 - 0.02 * Math.exp(-(lap - 1)), power: 1 }
}

function visit(radiusM: number, habit: (typeof HABITS)[number], pace: Pace, setup: SetupGrip, random: Random) {
  const fastness = Math.min(1, Math.max(0, radiusM / SLOW_RADIUS_M - 1))
  const mistake = random() < 0.02 ? 0.94 : 1
  const share = Math.min(1.005, habit.lateral + 0.011 * gaussian(random)) * mistake
  const foot = Math.min(1.02, habit.braking + 0.025 * gaussian(random))
  return {
    lateral: share * pace.grip * (setup.slow + (setup.fast - setup.slow) * fastness),
    braking: foot * pace.braking * setup.braking * Math.min(1, pace.grip + 0.02),
    traction: Math.min(1, 0.97 + 0.02 * gaussian(random)) * setup.traction * Math.min(1, pace.grip),
    coastM: Math.max(0, habit.coastM + 3.5 * gaussian(random)),
  }
}

/** Index of the corner whose habits apply at each metre: a corner owns the straight that leads to it. */
function cornerByMetre(track: Track): Uint8Array {
  const result = new Uint8Array(track.lengthM)
  const ends = track.corners.map((corner, i) => {
    const next = track.corners[(i + 1) % track.corners.length]!
    const gapM = (next.fromM - corner.toM + track.lengthM) % track.lengthM
    return corner.toM + Math.min(30, gapM / 3)
  })
  for (let s = 0; s < track.lengthM; s++) {
    const index = ends.findIndex(endM => s < endM)
    result[s] = index < 0 ? 0 : index
  }
  return result
}

function capSpeeds(limits: DriverLimits, track: Track, spec: OutingSpec): void {
  const { fromM, nodes } = outingSpan(track, spec.timedLaps)
  const inLapM = (spec.timedLaps + 1) * track.lengthM
  for (let i = 0; i < nodes; i++) {
    const stationM = fromM + i
    if (spec.line === 'driven' && (stationM < PIT_EXIT_M.fromM || stationM > inLapM + PIT_ENTRY_M.toM)) {
      limits.speedCapMps[i] = PIT_LIMIT_MPS
    }
    else if (stationM > inLapM + LIFT_OFF_M) {
      limits.speedCapMps[i] = IN_LAP_MPS
    }
  }
  if (spec.traffic) {
    const { lap, fromM: from, toM: to, share } = spec.traffic
    for (let s = Math.round(from); s < to; s++) {
      limits.speedShare[lap * track.lengthM + s - fromM] = share
    }
  }
}
