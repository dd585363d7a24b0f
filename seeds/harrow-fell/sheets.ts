import type { Sheet, SheetCorner } from '../../shared/schemas/setups'

/** A setup revision of the demo's car. */
export interface PlannedSetup {
  number: number
  name: string
  /** Number of the revision that it was made from. */
  basedOn: number | null
  sheet: Sheet
}

const front = (camberDeg: number, casterDeg: number): SheetCorner => ({
  coldKpa: 180,
  targetHotKpa: 215,
  camberDeg,
  casterDeg,
  toeMm: -0.8,
  springNpmm: 34,
  bumpClicks: 5,
  reboundClicks: 7,
  rideHeightMm: 128,
})

const rear = (camberDeg: number, rideHeightMm: number): SheetCorner => ({
  coldKpa: 175,
  targetHotKpa: 205,
  camberDeg,
  casterDeg: null,
  toeMm: 0.5,
  springNpmm: 28,
  bumpClicks: 4,
  reboundClicks: 6,
  rideHeightMm,
})

const FIRST: Sheet = {
  corners: { fl: front(-2.4, 5.4), fr: front(-2.5, 5.5), rl: rear(-1.8, 142), rr: rear(-1.9, 141) },
  axles: { front: { barMm: 22 }, rear: { barMm: 19 } },
  car: { brakeBiasPct: 64, frontPads: 'track 2', rearPads: 'road', splitterMm: 40, wingDeg: null, ballastKg: 0 },
  clicksFrom: 'full stiff',
  notes: 'As it left the garage in spring. Pushes wide in 5 and 10 once the fronts are hot.',
}

const SECOND = withRear(FIRST, { springNpmm: 32, reboundClicks: 8 }, 'Rear springs 28 to 32 N/mm, rear rebound two clicks softer to keep the tyre down over the bumps of 7.')

const THIRD: Sheet = {
  ...SECOND,
  corners: {
    ...SECOND.corners,
    fl: { ...SECOND.corners.fl, camberDeg: -3.1, coldKpa: 175 },
    fr: { ...SECOND.corners.fr, camberDeg: -3.2, coldKpa: 175 },
  },
  notes: 'Front camber to -3.1 and -3.2 with the shims from the spares box; cold fronts 5 kPa lower. Toe set again afterwards.',
}

/** The three revisions of the demo, each one change further than the one before. */
export const SETUPS: readonly PlannedSetup[] = [
  { number: 1, name: 'Spring baseline', basedOn: null, sheet: FIRST },
  { number: 2, name: 'Stiffer rear springs', basedOn: 1, sheet: SECOND },
  { number: 3, name: 'More front camber', basedOn: 2, sheet: THIRD },
]

/** @throws {RangeError} for a number that is not in the plan */
export function setupNumber(number: number): PlannedSetup {
  const setup = SETUPS.find(candidate => candidate.number === number)
  if (!setup) {
    throw new RangeError(`the plan has no setup revision ${number}`)
  }
  return setup
}

function withRear(sheet: Sheet, change: Partial<SheetCorner>, notes: string): Sheet {
  const { corners } = sheet
  const [rl, rr] = [{ ...corners.rl, ...change }, { ...corners.rr, ...change }]
  return { ...sheet, corners: { ...corners, rl, rr }, notes }
}
