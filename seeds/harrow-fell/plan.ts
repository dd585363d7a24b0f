import type { Conditions, OutingBody } from '../../shared/schemas/days'
import type { Role } from '../../shared/schemas/common'
import type { Traffic } from './driver'
import { SETUPS } from './sheets'

export interface PlannedPerson { key: 'nell' | 'iggy' | 'bo', name: string, email: string, role: Role }

export interface PlannedOuting {
  /** Order within the day, from 1. */
  number: number
  setup: number
  driver: PlannedPerson['key']
  /** With the offset of the circuit's time zone on that day. */
  startedAt: string
  timedLaps: number
  fuelStartL: number
  conditions: Conditions
  hotPressures: OutingBody['hotPressures']
  notes: string
  /** For the simulation only: grip of the day, seed, slower car ahead. */
  dayGrip: number
  seed: number
  traffic: Traffic | null
  fileName: string
}

export interface PlannedDay { date: string, name: string, notes: string, outings: PlannedOuting[] }

const weather = (airC: number, trackC: number, humidityPct: number, windMps: number, windFrom: string): Conditions =>
  ({ airC, trackC, humidityPct, windMps, windFrom, wetness: 'dry' })

const hot = (fl: number, fr: number, rl: number, rr: number) => ({ fl, fr, rl, rr })

const FIRST_DAY: PlannedDay = {
  date: '2026-09-12',
  name: 'Open pit lane, day one',
  notes: 'Dry all day. Question of the day: do the stiffer rear springs pay, and the front camber after them?',
  outings: [
    {
      number: 1, setup: 1, driver: 'nell', startedAt: '2026-09-12T09:34:00+01:00', timedLaps: 7, fuelStartL: 24,
      conditions: weather(13, 17, 78, 2, 'SW'), hotPressures: hot(219, 213, 206, 203),
      notes: 'First run of the day. Pushes in 5 as ever.', dayGrip: 1, seed: 120901, traffic: null,
      fileName: '2026-09-12-outing-1.csv',
    },
    {
      number: 2, setup: 2, driver: 'nell', startedAt: '2026-09-12T11:05:00+01:00', timedLaps: 8, fuelStartL: 24,
      conditions: weather(15, 22, 70, 3, 'SW'), hotPressures: hot(221, 215, 208, 204),
      notes: 'Rear springs changed in 40 minutes. Held up by a slower car in 8 on lap 5.', dayGrip: 1.001, seed: 120902,
      traffic: { lap: 5, fromM: 1690, toM: 2060, share: 0.82 }, fileName: '2026-09-12-outing-2.csv',
    },
    {
      number: 3, setup: 3, driver: 'nell', startedAt: '2026-09-12T14:20:00+01:00', timedLaps: 9, fuelStartL: 26,
      conditions: weather(17, 28, 61, 3, 'W'), hotPressures: hot(218, 212, 210, 206),
      notes: 'Front camber. Rear moves about in 7 and 11.', dayGrip: 0.998, seed: 120903, traffic: null,
      fileName: '2026-09-12-outing-3.csv',
    },
  ],
}

const SECOND_DAY: PlannedDay = {
  date: '2026-09-26',
  name: 'Open pit lane, day two',
  notes: 'Same three setups in the opposite order, so that the track coming in does not look like a faster car.',
  outings: [
    {
      number: 1, setup: 3, driver: 'nell', startedAt: '2026-09-26T09:40:00+01:00', timedLaps: 8, fuelStartL: 25,
      conditions: weather(10, 12, 84, 1, 'N'), hotPressures: hot(214, 208, 203, 200),
      notes: 'Cold track, two laps before the tyres worked.', dayGrip: 0.993, seed: 260901, traffic: null,
      fileName: '2026-09-26-outing-1.csv',
    },
    {
      number: 2, setup: 2, driver: 'nell', startedAt: '2026-09-26T11:15:00+01:00', timedLaps: 10, fuelStartL: 28,
      conditions: weather(12, 16, 76, 2, 'N'), hotPressures: hot(219, 213, 206, 202),
      notes: 'Longest run so far. Caught a slower car before 10 on lap 8.', dayGrip: 0.996, seed: 260902,
      traffic: { lap: 8, fromM: 2010, toM: 2400, share: 0.84 }, fileName: '2026-09-26-outing-2.csv',
    },
    {
      number: 3, setup: 1, driver: 'nell', startedAt: '2026-09-26T14:10:00+01:00', timedLaps: 6, fuelStartL: 22,
      conditions: weather(14, 21, 68, 2, 'NW'), hotPressures: hot(220, 214, 207, 203),
      notes: 'Back to the spring baseline. The push in 5 and 10 is back too.', dayGrip: 0.998, seed: 260903, traffic: null,
      fileName: '2026-09-26-outing-3.csv',
    },
  ],
}

/** Everything the demo puts into a team. Invented people at addresses of a domain that can never exist (RFC 2606). */
export const PLAN = {
  team: 'Fell Road Garage',
  people: [
    { key: 'nell', name: 'Nell Placeholder', email: 'nell@lapwright.example', role: 'owner' },
    { key: 'iggy', name: 'Iggy Sample', email: 'iggy@lapwright.example', role: 'coach' },
    { key: 'bo', name: 'Bo Testcase', email: 'bo@lapwright.example', role: 'crew' },
  ] satisfies PlannedPerson[] as PlannedPerson[],
  circuit: {
    name: 'Harrow Fell',
    timeZone: 'Europe/London',
    notes: 'Club circuit on open moor, 3104 m, eleven corners. Invented.',
    layout: { name: 'Full circuit', direction: 'clockwise' as const },
  },
  car: {
    name: 'No. 47',
    number: '47',
    year: 2006,
    kind: 'hatchback, front-wheel drive',
    notes: 'Road registered, cage and bucket seats. Driven to the track and home again.',
  },
  setups: SETUPS,
  days: [FIRST_DAY, SECOND_DAY],
}
