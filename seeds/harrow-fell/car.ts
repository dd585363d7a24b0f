/** Standard gravity, m/s2 (NIST SP 811, appendix B.8). */
export const GRAVITY_MPS2 = 9.80665

/** The demo's front-driven hatchback as a point mass. Invented figures of the usual size. */
export const CAR = {
  /** With driver, without fuel. */
  massKg: 1152,
  fuelKgPerL: 0.745,
  wheelPowerW: 89.5e3,
  dragAreaM2: 0.66,
  airKgPerM3: 1.2,
  rollingN: 170,
  /** Lateral grip, braking and traction in g on warm tyres. */
  grip: 1.12,
  brake: 0.93,
  traction: 0.5,
  /** Deceleration of the closed throttle, g. */
  engineBrake: 0.05,
  /** Line pressure at full braking, bar. */
  brakeBar: 64,
  /** Wheel angle times this is steering angle. */
  steeringRatio: 15.5,
  wheelbaseM: 2.58,
  /** Degrees at the road wheel per g. */
  understeerDegPerG: 1.4,
  idleRpm: 880,
  shiftUpRpm: 6700,
  /** A lower gear is taken when it would not turn faster than this. */
  shiftDownRpm: 5600,
  shiftTimeS: 0.2,
  peakRpm: 6100,
} as const

/** Metres a second per 1000 rpm in the five gears. */
const SPEED_PER_1000_RPM = [2.1, 3.55, 5.0, 6.55, 8.2] as const
export const TOP_GEAR = SPEED_PER_1000_RPM.length

/** Engine speed with the clutch home, or idling while the car crawls. */
export function rpmAt(speedMps: number, gear: number): number {
  return Math.max(CAR.idleRpm, speedMps / SPEED_PER_1000_RPM[gear - 1]! * 1000)
}

/** Air and rolling resistance as deceleration, m/s2. */
export function dragMps2(speedMps: number, massKg: number): number {
  if (speedMps === 0) {
    return 0
  }
  return (0.5 * CAR.airKgPerM3 * CAR.dragAreaM2 * speedMps * speedMps + CAR.rollingN) / massKg
}

/**
 * What the engine can push at full throttle, m/s2, up to what the front tyres take.
 * @param room share of the friction ellipse that cornering leaves, 0 to 1
 */
export function driveMps2(speedMps: number, gear: number, massKg: number, traction: number, room: number): number {
  const off = (rpmAt(speedMps, gear) - CAR.peakRpm) / CAR.peakRpm
  const powerW = CAR.wheelPowerW * Math.max(0.3, 1 - 0.9 * off * off)
  return Math.min(powerW / (massKg * Math.max(speedMps, 3)), CAR.traction * traction * GRAVITY_MPS2 * room)
}

/** The gear after a look at the rev counter: one up, one down, or the same. */
export function nextGear(speedMps: number, gear: number): number {
  if (gear < TOP_GEAR && rpmAt(speedMps, gear) > CAR.shiftUpRpm) {
    return gear + 1
  }
  return gear > 1 && rpmAt(speedMps, gear - 1) < CAR.shiftDownRpm ? gear - 1 : gear
}
