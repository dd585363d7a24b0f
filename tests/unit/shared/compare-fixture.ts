import type { ComparedLap, Comparison } from '../../../shared/schemas/compare'

const ID = (n: number) => `00000000-0000-7000-8000-${String(n).padStart(12, '0')}`

/** A lap of Harrow Fell with nothing remarkable about it. */
export function someLap(changes: Partial<ComparedLap> = {}): ComparedLap {
  return {
    id: ID(7),
    number: 7,
    timeS: 91.482,
    flags: [],
    excluded: false,
    outing: { id: ID(103), number: 3, startedAt: '2026-09-12T12:20:00Z' },
    day: { id: ID(200), date: '2026-09-12', timeZone: 'Europe/London' },
    layout: { id: ID(300), name: 'Full', circuitName: 'Harrow Fell' },
    car: { id: ID(400), name: 'No. 47' },
    setup: { id: ID(512), number: 12, name: 'Stiffer rear' },
    driver: { id: ID(600), name: 'Nell Placeholder' },
    fuelStartL: 30,
    passenger: false,
    conditions: { airC: 21, trackC: 34, humidityPct: null, windMps: 3, windFrom: 'W', wetness: 'dry' },
    hotPressures: { fl: null, fr: null, rl: null, rr: null },
    sectorsS: [30.1, 31.411, 29.971],
    rateHz: 25,
    speed: [40, 30, 20, 30, 40],
    longitudinal: [1, -9, -2, 3, 2],
    lateral: [0, -8, 3, -9, 0],
    source: { speed: 'logged', longitudinal: 'logged', lateral: 'derived' },
    brakings: [],
    ...changes,
  }
}

/** Lap 7 of outing 3 against lap 4 of outing 1, 0.613 s quicker. */
export function someComparison(changes: Partial<Comparison> = {}): Comparison {
  return {
    teamId: ID(1),
    stationM: [0, 100, 200, 300, 400],
    pathM: { x: [0, 100, 100, 0, 0], y: [0, 0, 100, 100, 1] },
    lap: someLap(),
    against: someLap({
      id: ID(4), number: 4, timeS: 90.869, sectorsS: [30, 31, 29.869],
      outing: { id: ID(101), number: 1, startedAt: null },
    }),
    differenceS: [0, 0.1, 0.5, 0.55, 0.613],
    sectorLinesM: [120, 260],
    setupDifferences: [],
    sameSettings: 40,
    ...changes,
  }
}
