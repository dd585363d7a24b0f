import type { Sheet } from '../../shared/schemas/setups'

/** What a setup sheet is worth on the road, as factors of the car's basic grip (1 = as the first revision). */
export interface SetupGrip {
  /** Steady cornering, slow and fast bends. */
  slow: number
  fast: number
  /** Drive out of a bend. */
  traction: number
  braking: number
}

// The hatchback: weights, tracks and motion ratios for the arithmetic below. Invented, of usual size.
const TRACK_M = { front: 1.462, rear: 1.448 }
const MOTION_RATIO = { front: 0.95, rear: 0.75 }
const FRONT_WEIGHT = 0.618
/** Roll stiffness of a solid bar of 20 mm at the wheels, N m/rad; goes with the fourth power of the diameter. */
const BAR_20_NM_PER_RAD = { front: 12500, rear: 22500 }
/** Sensitivity of grip to load transfer and to camber, and the camber that suits the tyre. Invented. */
const LOAD_SENSITIVITY = 0.75
const CAMBER_LOSS_PER_DEG2 = 0.009
const BEST_CAMBER_DEG = { front: -3.2, rear: -2 }

/**
 * How a sheet shifts the grip of the car: springs and bars share out the load transfer, camber suits the tyre more or
 * less, and the axle that gives up first sets the limit. A front-driven car of this kind runs out of front grip, so
 * what loads the rear helps, until a nervous rear costs trust in fast bends. Only a simulation's idea of a car: its
 * figures make the demo's laps differ by tenths and are no advice.
 * @see Milliken and Milliken, Race Car Vehicle Dynamics, chapter 18, for load transfer by roll stiffness
 */
export function setupGrip(sheet: Sheet, baseline: Sheet): SetupGrip {
  const now = axleGrip(sheet)
  const was = axleGrip(baseline)
  const limit = (g: { front: number, rear: number }) => softMin(g.front, g.rear)
  const trust = (g: { front: number, rear: number }) => 1 - 1.6 * Math.max(0, 0.115 - (g.rear - g.front))
  return {
    slow: limit(now) / limit(was),
    fast: limit(now) * trust(now) / (limit(was) * trust(was)),
    traction: now.front / was.front,
    braking: 1 - 0.004 * Math.abs((sheet.car.brakeBiasPct ?? 64) - 64),
  }
}

function axleGrip(sheet: Sheet): { front: number, rear: number } {
  const stiffness = {
    front: rollStiffness(sheet.corners.fl.springNpmm ?? 30, 'front', sheet.axles.front.barMm ?? 0),
    rear: rollStiffness(sheet.corners.rl.springNpmm ?? 30, 'rear', sheet.axles.rear.barMm ?? 0),
  }
  const share = stiffness.front / (stiffness.front + stiffness.rear)
  const camber = (left: number | null, right: number | null) => ((left ?? 0) + (right ?? 0)) / 2
  const fit = (deg: number, bestDeg: number) => 1 - CAMBER_LOSS_PER_DEG2 * (deg - bestDeg) ** 2
  const { fl, fr, rl, rr } = sheet.corners
  const front = 1.2 - LOAD_SENSITIVITY * share / (2 * FRONT_WEIGHT)
  const rear = 1.36 - LOAD_SENSITIVITY * (1 - share) / (2 * (1 - FRONT_WEIGHT))
  return {
    front: front * fit(camber(fl.camberDeg, fr.camberDeg), BEST_CAMBER_DEG.front),
    rear: rear * fit(camber(rl.camberDeg, rr.camberDeg), BEST_CAMBER_DEG.rear),
  }
}

/** N m/rad: wheel rate times half the squared track, plus the bar. */
function rollStiffness(springNpmm: number, axle: 'front' | 'rear', barMm: number): number {
  const wheelRateNpm = springNpmm * 1000 * MOTION_RATIO[axle] ** 2
  return wheelRateNpm * TRACK_M[axle] ** 2 / 2 + BAR_20_NM_PER_RAD[axle] * (barMm / 20) ** 4
}

/** The lesser of the two, with a rounded corner a hundredth wide. */
function softMin(a: number, b: number): number {
  return -0.01 * Math.log(Math.exp(-a / 0.01) + Math.exp(-b / 0.01))
}
