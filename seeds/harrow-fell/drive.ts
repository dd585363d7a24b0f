import { CAR, dragMps2, driveMps2, GRAVITY_MPS2, nextGear } from './car'
import { driverLimits, outingSpan, type DriverLimits, type OutingSpec } from './driver'
import { outingLine } from './line'
import { pathAt } from './path'
import type { Random } from './random'
import { naturalSpline, type Spline } from './spline'
import type { Track } from './track'

/** Standard deviation of the driven line from lap to lap, metres. */
const LINE_SPREAD_M = 0.4
/** Feet are not switches: speeds are eased over this many metres to either side. */
const EASE_M = 7

/**
 * A driven outing on nodes one metre of station apart. Between nodes the station moves with constant acceleration, so
 * that the whole motion is one continuous curve in closed form: `path` says where, `stationRateMps` when.
 */
export interface DrivenOuting {
  track: Track
  timedLaps: number
  /** Offset of the path from the centre line (left positive) by unwrapped station. */
  offset: Spline
  /** Unwrapped station of the first node; the car stands there at time zero of `timeS`. */
  fromM: number
  /** Rate of change of the station, m/s, and the time of each node, s. */
  stationRateMps: Float64Array
  timeS: Float64Array
  speedMps: Float64Array
  /** Along the path, m/s2. */
  accelMps2: Float64Array
  /** Throttle 0 to 1, brake line pressure in bar, gear 1 to 5. */
  throttle: Float64Array
  brakeBar: Float64Array
  gear: Uint8Array
}

interface Road {
  curvature: Float64Array
  stretch: Float64Array
  /** Length of path from a node to the next, metres. */
  stepM: Float64Array
  massKg: Float64Array
}

/**
 * Drive an outing: the fastest motion that a point mass on a friction ellipse can make on the driven path within its
 * power, drag and brakes and the driver's own limits, by a backward pass for braking and a forward pass for driving.
 * @see Brayshaw and Harrison, A quasi steady state approach to race car lap simulation (2005). O(n) in metres driven.
 */
export function driveOuting(track: Track, spec: OutingSpec, random: Random): DrivenOuting {
  const { fromM, nodes } = outingSpan(track, spec.timedLaps)
  const limits = driverLimits(track, spec, random)
  const offset = spec.line === 'centre'
    ? naturalSpline(0, 1, [0, 0, 0])
    : outingLine(track, spec.timedLaps, LINE_SPREAD_M, random)
  const road = makeRoad(track, offset, fromM, nodes, spec)
  const ceiling = cornerSpeeds(road, limits)
  const braked = brakePass(road, limits, ceiling)
  const first = drivePass(road, limits, braked, new Uint8Array(nodes))
  const second = drivePass(road, limits, braked, coastZones(limits, first.onsets, nodes))
  const speedMps = easeSpeeds(second.speedMps, road)
  const accelMps2 = accelerations(speedMps, road)
  const stationRateMps = speedMps.map((v, i) => v / road.stretch[i]!)
  return {
    track,
    timedLaps: spec.timedLaps,
    offset,
    fromM,
    stationRateMps,
    timeS: nodeTimes(stationRateMps),
    speedMps,
    accelMps2,
    ...pedals(road, limits, speedMps, accelMps2, second.gear),
    gear: second.gear,
  }
}

function makeRoad(track: Track, offset: Spline, fromM: number, nodes: number, spec: OutingSpec): Road {
  const curvature = new Float64Array(nodes)
  const stretch = new Float64Array(nodes)
  for (let i = 0; i < nodes; i++) {
    const p = pathAt(track, offset, fromM + i)
    curvature[i] = p.curvaturePerM
    stretch[i] = p.stretch
  }
  const fullKg = CAR.massKg + CAR.fuelKgPerL * spec.fuelL
  return {
    curvature,
    stretch,
    stepM: stretch.map((value, i) => (value + stretch[Math.min(i + 1, nodes - 1)]!) / 2),
    // A lap of a small engine flat out takes about a litre.
    massKg: stretch.map((_, i) => fullKg - CAR.fuelKgPerL * (fromM + i) / track.lengthM),
  }
}

function cornerSpeeds(road: Road, limits: DriverLimits): Float64Array {
  return road.curvature.map((k, i) => {
    const gripMps2 = CAR.grip * limits.lateral[i]! * GRAVITY_MPS2
    const cornerMps = Math.min(62, Math.sqrt(gripMps2 / Math.max(Math.abs(k), 1e-4)))
    return Math.min(limits.speedCapMps[i]!, limits.speedShare[i]! * cornerMps)
  })
}

/** Share of the friction ellipse that cornering at a speed leaves for braking or driving. */
function room(road: Road, limits: DriverLimits, i: number, speedMps: number): number {
  const used = speedMps * speedMps * Math.abs(road.curvature[i]!) / (CAR.grip * limits.lateral[i]! * GRAVITY_MPS2)
  return Math.sqrt(Math.max(0, 1 - used * used))
}

function brakePass(road: Road, limits: DriverLimits, ceiling: Float64Array): Float64Array {
  const result = ceiling.slice()
  result[result.length - 1] = 0
  for (let i = result.length - 2; i >= 0; i--) {
    const v = result[i + 1]!
    const pedal = CAR.brake * limits.braking[i]! * GRAVITY_MPS2 * (0.05 + 0.95 * room(road, limits, i + 1, v))
    const decel = pedal + dragMps2(v, road.massKg[i]!)
    result[i] = Math.min(result[i]!, Math.sqrt(v * v + 2 * decel * road.stepM[i]!))
  }
  return result
}

/** Forwards under the ceiling of `braked`; where it is hit the brakes go on, which is an onset. */
function drivePass(road: Road, limits: DriverLimits, braked: Float64Array, coast: Uint8Array) {
  const speedMps = new Float64Array(braked.length)
  const gear = new Uint8Array(braked.length).fill(1)
  const onsets: number[] = []
  let shiftLeftM = 0
  let free = true
  for (let i = 0; i < braked.length - 1; i++) {
    const v = speedMps[i]!
    const mass = road.massKg[i]!
    const wanted = nextGear(v, gear[i]!)
    if (wanted > gear[i]! && free) {
      shiftLeftM = v * CAR.shiftTimeS
    }
    const idle = coast[i] === 1 || shiftLeftM > 0
    const push = idle
      ? -CAR.engineBrake * GRAVITY_MPS2
      : limits.power[i]! * driveMps2(v, wanted, mass, limits.traction[i]!, room(road, limits, i, v))
    const next = Math.sqrt(Math.max(4, v * v + 2 * (push - dragMps2(v, mass)) * road.stepM[i]!))
    const held = next >= braked[i + 1]!
    if (held && free && braked[i + 1]! < braked[i]!) {
      onsets.push(i)
    }
    free = !held
    speedMps[i + 1] = held ? braked[i + 1]! : next
    gear[i + 1] = wanted
    shiftLeftM = held ? 0 : Math.max(0, shiftLeftM - road.stepM[i]!)
  }
  return { speedMps, gear, onsets }
}

/** Where the foot is off the throttle before the brakes go on. */
function coastZones(limits: DriverLimits, onsets: number[], nodes: number): Uint8Array {
  const zones = new Uint8Array(nodes)
  for (const onset of onsets) {
    const lead = Math.round(limits.coastM[onset]!)
    zones.fill(1, Math.max(0, onset - lead), Math.min(nodes, onset + Math.ceil(lead / 3)))
  }
  return zones
}

/** Triangular weights along the path; narrower towards both ends, which stay at rest. */
function easeSpeeds(speedMps: Float64Array, road: Road): Float64Array {
  const last = speedMps.length - 1
  return speedMps.map((_, i) => {
    const reach = Math.min(EASE_M, i, last - i)
    let [sum, weights] = [0, 0]
    for (let j = -reach; j <= reach; j++) {
      const weight = (1 - Math.abs(j) / (reach + 1)) * road.stepM[i + j]!
      sum += weight * speedMps[i + j]!
      weights += weight
    }
    return sum / weights
  })
}

/** Central difference of v2 / 2 along the path, which is the acceleration. */
function accelerations(speedMps: Float64Array, road: Road): Float64Array {
  const last = speedMps.length - 1
  return speedMps.map((_, i) => {
    const [a, b] = [Math.max(0, i - 1), Math.min(last, i + 1)]
    const alongM = (a < i ? road.stepM[a]! : 0) + (b > i ? road.stepM[i]! : 0)
    return (speedMps[b]! ** 2 - speedMps[a]! ** 2) / (2 * alongM)
  })
}

/** Constant acceleration of the station between nodes: the time is twice the distance over the sum of the rates. */
export function nodeTimes(stationRateMps: Float64Array): Float64Array {
  const timeS = new Float64Array(stationRateMps.length)
  for (let i = 1; i < timeS.length; i++) {
    timeS[i] = timeS[i - 1]! + 2 / (stationRateMps[i - 1]! + stationRateMps[i]!)
  }
  return timeS
}

/** What the feet must have done for this motion. */
function pedals(road: Road, limits: DriverLimits, speedMps: Float64Array, accelMps2: Float64Array, gear: Uint8Array) {
  const throttle = new Float64Array(speedMps.length)
  const brakeBar = new Float64Array(speedMps.length)
  for (let i = 0; i < speedMps.length; i++) {
    const v = speedMps[i]!
    const free = room(road, limits, i, v)
    // Tyres at an angle drag: a foot on the throttle just to hold speed.
    const scrub = 0.6 * (1 - free * free)
    const demand = accelMps2[i]! + dragMps2(v, road.massKg[i]!) + scrub
    const most = driveMps2(v, gear[i]!, road.massKg[i]!, 1, 1)
    throttle[i] = Math.min(1, Math.max(0, 1.03 * demand / most))
    const brakeMps2 = Math.max(0, -demand - CAR.engineBrake * GRAVITY_MPS2)
    brakeBar[i] = CAR.brakeBar * brakeMps2 / (CAR.brake * GRAVITY_MPS2)
  }
  return { throttle, brakeBar }
}
