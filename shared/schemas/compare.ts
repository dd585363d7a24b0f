import { z } from 'zod'
import { idSchema } from './common'
import { conditionsSchema, hotPressuresSchema } from './days'
import { settingSchema } from './setups'

export const compareQuery = z.object({ lap: idSchema, against: idSchema })

const series = z.array(z.number().nullable())

export const brakingSchema = z.object({
  onsetM: z.number(),
  onsetSpeedMps: z.number(),
  releaseM: z.number(),
  /** Hardest deceleration of the zone, positive, m/s2. */
  peakMps2: z.number(),
})

export const comparedLapSchema = z.object({
  id: idSchema,
  number: z.int(),
  timeS: z.number(),
  flags: z.array(z.string()),
  excluded: z.boolean(),
  outing: z.object({ id: idSchema, number: z.int(), startedAt: z.string().nullable() }),
  day: z.object({ id: idSchema, date: z.string(), timeZone: z.string() }),
  layout: z.object({ id: idSchema, name: z.string(), circuitName: z.string() }),
  car: z.object({ id: idSchema, name: z.string() }),
  setup: z.object({ id: idSchema, number: z.int(), name: z.string() }),
  driver: z.object({ id: idSchema, name: z.string() }),
  fuelStartL: z.number().nullable(),
  passenger: z.boolean(),
  conditions: conditionsSchema,
  hotPressures: hotPressuresSchema,
  sectorsS: z.array(z.number().nullable()),
  rateHz: z.number(),
  /** m/s, by station. */
  speed: series,
  /** m/s2, positive when speeding up. */
  longitudinal: series,
  /** m/s2, positive in a left-hand bend (ISO 8855). */
  lateral: series,
  source: z.object({ speed: z.enum(['logged', 'derived']), longitudinal: z.enum(['logged', 'derived']), lateral: z.enum(['logged', 'derived']) }),
  brakings: z.array(brakingSchema),
})
export type ComparedLap = z.infer<typeof comparedLapSchema>

export const comparisonSchema = z.object({
  teamId: idSchema,
  /** Metres from the start/finish line along the faster lap's path; the last one is its length. */
  stationM: z.array(z.number()),
  /** Path of the faster lap in local metres, east and north, at the same stations. */
  pathM: z.object({ x: z.array(z.number()), y: z.array(z.number()) }),
  lap: comparedLapSchema,
  against: comparedLapSchema,
  /** Time of `lap` minus time of `against` at each station, s; ends at the difference of the lap times. */
  differenceS: series,
  /** Sector lines of the layout, by the station at which the faster lap crossed them. */
  sectorLinesM: z.array(z.number()),
  /** Settings that differ between the two sheets, and how many are the same. */
  setupDifferences: z.array(z.object({
    label: z.string(),
    unit: z.string(),
    lap: settingSchema,
    against: settingSchema,
  })),
  sameSettings: z.int(),
})
export type Comparison = z.infer<typeof comparisonSchema>
