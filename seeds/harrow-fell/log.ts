import { CAR, GRAVITY_MPS2 } from './car'
import type { DrivenOuting } from './drive'
import { makeEngine, type EngineReading } from './engine'
import type { Degrees } from './geodesy'
import { gaussian, type Random } from './random'
import { drivingTimeS, stateAt, type CarState } from './trajectory'
import { outingTruth, type TrueLap } from './truth'

/** Standard deviations of what the sensors add. */
export interface Noise {
  /** Position, each of east and north: from fix to fix, and a slow drift with its time constant. */
  positionM: number
  driftM: number
  driftTimeS: number
  speedMps: number
  accelerationG: number
}

/** An ordinary receiver under open sky, and accelerometers bolted to a car that shakes. */
export const USUAL_NOISE: Noise = { positionM: 0.06, driftM: 0.4, driftTimeS: 90, speedMps: 0.05, accelerationG: 0.02 }

export interface LogOptions {
  rateHz: number
  noise: Noise | 'off'
  /** Seconds that the logger runs with the car standing, before and after. */
  standS: number
  settleS: number
  oilStartC: number
  airC: number
}

export const USUAL_LOG: LogOptions = { rateHz: 25, noise: USUAL_NOISE, standS: 12, settleS: 6, oilStartC: 74, airC: 17 }

export interface OutingLog {
  csv: string
  truth: TrueLap[]
  rows: number
}

export const LOG_HEADER = [
  'time_s', 'latitude', 'longitude', 'speed_kmh', 'acc_long_g', 'acc_lat_g', 'throttle_pct', 'brake_bar', 'steering_deg',
  'rpm', 'gear', 'oil_temp_c', 'oil_pressure_bar', 'coolant_temp_c', 'battery_v',
].join(',')

interface Errors { eastM: number, northM: number, speedMps: number, longG: number, latG: number }

/**
 * What a logger in the car writes during an outing, as CSV text, and what really happened.
 * The sample instants know nothing of the timing lines. Without noise positions carry eleven decimals (about a
 * micrometre) and speeds six, so that the text holds the motion itself.
 */
export function writeLog(outing: DrivenOuting, options: LogOptions, random: Random): OutingLog {
  const { rateHz, standS, settleS, noise } = options
  const rows = Math.floor((standS + drivingTimeS(outing) + settleS) * rateHz) + 1
  const engine = makeEngine(options.oilStartC, options.airC)
  const errors = noise === 'off' ? () => NO_ERRORS : makeErrors(noise, 1 / rateHz, random)
  const lines = [LOG_HEADER]
  for (let row = 0; row < rows; row++) {
    const timeS = row / rateHz
    const state = stateAt(outing, timeS - standS)
    const reading = engine(state, row === 0 ? 0 : 1 / rateHz)
    const error = errors(state)
    const place = outing.track.toDegrees(state.eastM + error.eastM, state.northM + error.northM)
    lines.push([timeS.toFixed(3), ...formatRow(place, state, reading, error, noise === 'off')].join(','))
  }
  return { csv: lines.join('\n') + '\n', truth: outingTruth(outing, standS, (rows - 1) / rateHz), rows }
}

const NO_ERRORS: Errors = { eastM: 0, northM: 0, speedMps: 0, longG: 0, latG: 0 }

/** White noise on each fix, a drift and a shaking car as first-order Gauss-Markov processes. */
function makeErrors(noise: Noise, stepS: number, random: Random): (state: CarState) => Errors {
  const keep = Math.exp(-stepS / noise.driftTimeS)
  const kick = noise.driftM * Math.sqrt(1 - keep * keep)
  const shakeKeep = Math.exp(-stepS / 0.06)
  const shakeKick = noise.accelerationG * Math.sqrt(1 - shakeKeep * shakeKeep)
  const drift = [noise.driftM * gaussian(random), noise.driftM * gaussian(random)]
  const shake = [0, 0]
  return (state) => {
    for (const axis of [0, 1]) {
      drift[axis] = keep * drift[axis]! + kick * gaussian(random)
      shake[axis] = shakeKeep * shake[axis]! + shakeKick * gaussian(random)
    }
    const rough = 0.15 + state.speedMps / 40
    return {
      eastM: drift[0]! + noise.positionM * gaussian(random),
      northM: drift[1]! + noise.positionM * gaussian(random),
      speedMps: noise.speedMps * gaussian(random),
      longG: shake[0]! * rough,
      latG: shake[1]! * rough,
    }
  }
}

function formatRow(place: Degrees, state: CarState, reading: EngineReading, error: Errors, exact: boolean): string[] {
  const latG = state.lateralMps2 / GRAVITY_MPS2
  const wheelDeg = Math.atan(CAR.wheelbaseM * state.curvaturePerM) * 180 / Math.PI + CAR.understeerDegPerG * latG
  const degrees = exact ? 11 : 8
  const fine = exact ? 6 : 3
  return [
    place.latitudeDeg.toFixed(degrees),
    place.longitudeDeg.toFixed(degrees),
    (Math.max(0, state.speedMps + error.speedMps) * 3.6).toFixed(exact ? 6 : 2),
    signed(state.longitudinalMps2 / GRAVITY_MPS2 + error.longG, fine),
    signed(latG + error.latG, fine),
    (state.throttle * 100).toFixed(0),
    state.brakeBar.toFixed(1),
    signed(wheelDeg * CAR.steeringRatio, 0),
    reading.rpm.toFixed(0),
    String(state.gear),
    reading.oilTempC.toFixed(1),
    reading.oilPressureBar.toFixed(2),
    reading.coolantTempC.toFixed(1),
    reading.batteryV.toFixed(1),
  ]
}

/** Fixed decimals without the minus sign of a rounded zero. */
function signed(value: number, digits: number): string {
  return (Math.abs(value) < 0.5 * 10 ** -digits ? 0 : value).toFixed(digits)
}
