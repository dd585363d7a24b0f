import { z } from 'zod'
import { basedOn, dateSchema, idSchema, instantSchema, notesSchema, optionalNumber, optionalPressureKpa, versioned } from './common'
import { settingSchema } from './setups'
import { LOG_STATUSES, logPreviewSchema, logProblemSchema, columnMapSchema } from './logs'

export const WETNESS = ['dry', 'damp', 'wet'] as const

export const conditionsSchema = z.object({
  airC: optionalNumber(-30, 55, '°C'),
  trackC: optionalNumber(-30, 80, '°C'),
  humidityPct: optionalNumber(0, 100, '%'),
  windMps: optionalNumber(0, 40, 'm/s'),
  windFrom: z.string().trim().max(20, 'at most 20 characters').default(''),
  wetness: z.enum(WETNESS).nullable().default(null),
})
export type Conditions = z.infer<typeof conditionsSchema>

/** Pressures measured on return, kPa above ambient. */
export const hotPressuresSchema = z.object({
  fl: optionalPressureKpa(),
  fr: optionalPressureKpa(),
  rl: optionalPressureKpa(),
  rr: optionalPressureKpa(),
})

export const dayBody = z.object({
  circuitId: idSchema,
  date: dateSchema,
  name: z.string().trim().max(120, 'at most 120 characters').default(''),
  notes: notesSchema,
})
export type DayBody = z.infer<typeof dayBody>
export const dayChange = dayBody.extend(basedOn)

export const outingBody = z.object({
  layoutId: idSchema,
  carId: idSchema,
  setupId: idSchema,
  driverId: idSchema,
  /** Local times are put together with the day's date and zone before they are sent. */
  startedAt: instantSchema.nullable().default(null),
  fuelStartL: optionalNumber(0, 300, 'l'),
  passenger: z.boolean().default(false),
  conditions: conditionsSchema.prefault({}),
  hotPressures: hotPressuresSchema.prefault({}),
  notes: notesSchema,
})
export type OutingBody = z.infer<typeof outingBody>
export const outingChange = outingBody.extend(basedOn)

/** Logs of an outing that go together with it, each named; an outing with others stays. */
export const removeOutingQuery = z.object({
  withLog: z.union([idSchema.transform(id => [id]), z.array(idSchema).max(100)]).default([]),
})

export const LAP_KINDS = ['out', 'timed', 'in'] as const

export const lapSchema = z.object({
  id: idSchema,
  /** The log it was cut from. */
  logId: idSchema.nullable(),
  number: z.int(),
  kind: z.enum(LAP_KINDS),
  startS: z.number(),
  timeS: z.number(),
  /** One more than there are sector lines; null where a line was missed; empty for out and in laps. */
  sectorsS: z.array(z.number().nullable()),
  flags: z.array(z.string()),
  excluded: z.boolean(),
  excludedReason: z.string(),
})
export type Lap = z.infer<typeof lapSchema>

export const excludeBody = z.discriminatedUnion('excluded', [
  z.object({ excluded: z.literal(true), reason: z.string().trim().min(1, 'please say why, for example: traffic in corner 8').max(200, 'at most 200 characters') }),
  z.object({ excluded: z.literal(false) }),
])

/** A log as lists show it. */
export const logSummarySchema = z.object({
  id: idSchema,
  fileName: z.string(),
  sizeBytes: z.number(),
  status: z.enum(LOG_STATUSES),
  /** How many rows the reader had to leave out or mend; its own sheet names them. */
  rowProblems: z.int(),
  /** Why it was refused, or what stands in the way. */
  problem: z.object({ code: z.string(), message: z.string(), row: z.int().optional() }).nullable(),
})
export type LogSummary = z.infer<typeof logSummarySchema>

export const logSchema = logSummarySchema.extend({
  teamId: idSchema,
  sha256: z.string().nullable(),
  uploadedAt: z.string(),
  rows: z.int().nullable(),
  samples: z.int().nullable(),
  rateHz: z.number().nullable(),
  durationS: z.number().nullable(),
  preview: logPreviewSchema.nullable(),
  columnMap: columnMapSchema.nullable(),
  /** The map was taken from an earlier file with the same header. */
  remembered: z.boolean(),
  problems: z.array(logProblemSchema),
  channels: z.array(z.object({ name: z.string(), label: z.string(), unit: z.string(), rateHz: z.number() })),
  outing: z.object({
    id: idSchema,
    number: z.int(),
    dayId: idSchema,
    date: z.string(),
    circuitName: z.string(),
    layoutId: idSchema,
    layoutName: z.string(),
    lineCount: z.int(),
    carName: z.string(),
    driverName: z.string(),
  }).nullable(),
  /** Warnings of the cut: lines never crossed, and the like. */
  warnings: z.array(logProblemSchema),
})
export type Log = z.infer<typeof logSchema>

/** Progress of a log while it is read, sent as server-sent events. */
export const logProgressSchema = z.object({
  logId: idSchema,
  status: z.enum(LOG_STATUSES),
  step: z.string().nullable(),
  /** Share of the whole job, 0 to 1. */
  fraction: z.number().min(0).max(1),
  /** The worker was lost in the middle, and the reading begins again. */
  restarted: z.boolean().optional(),
})
export type LogProgress = z.infer<typeof logProgressSchema>

export const outingSummarySchema = z.object({
  id: idSchema,
  number: z.int(),
  startedAt: z.string().nullable(),
  layout: z.object({ id: idSchema, name: z.string(), lineCount: z.int() }),
  car: z.object({ id: idSchema, name: z.string() }),
  setup: z.object({ id: idSchema, number: z.int(), name: z.string() }),
  driver: z.object({ id: idSchema, name: z.string() }),
  fuelStartL: z.number().nullable(),
  passenger: z.boolean(),
  conditions: conditionsSchema,
  hotPressures: hotPressuresSchema,
  notes: z.string(),
  laps: z.array(lapSchema),
  logs: z.array(logSummarySchema),
  ...versioned,
  /** Settings that differ from the outing before with the same car. */
  setupChanges: z.array(z.object({ label: z.string(), unit: z.string(), from: settingSchema, to: settingSchema })),
})
export type OutingSummary = z.infer<typeof outingSummarySchema>

export const daySchema = z.object({
  id: idSchema,
  teamId: idSchema,
  date: z.string(),
  name: z.string(),
  notes: z.string(),
  circuit: z.object({
    id: idSchema,
    name: z.string(),
    timeZone: z.string(),
    layouts: z.array(z.object({ id: idSchema, name: z.string() })),
  }),
  outings: z.array(outingSummarySchema),
  ...versioned,
})
export type Day = z.infer<typeof daySchema>

export const dayListItemSchema = z.object({
  id: idSchema,
  date: z.string(),
  name: z.string(),
  circuitName: z.string(),
  outingCount: z.int(),
  timedLapCount: z.int(),
  bestS: z.number().nullable(),
  /** In which weather, when there were wet laps; null when all laps were dry. */
  bestOf: z.enum(['dry', 'wet']).nullable(),
})
export type DayListItem = z.infer<typeof dayListItemSchema>

/** A page of days; `next` is the cursor of the page after it, null on the last. */
export const dayListSchema = z.object({ items: z.array(dayListItemSchema), next: z.string().nullable() })
export type DayList = z.infer<typeof dayListSchema>

export const outingSchema = outingSummarySchema.omit({ setupChanges: true }).extend({
  teamId: idSchema,
  day: z.object({
    id: idSchema,
    date: z.string(),
    name: z.string(),
    circuitId: idSchema,
    circuitName: z.string(),
    timeZone: z.string(),
  }),
})
export type Outing = z.infer<typeof outingSchema>

/** A timed lap as the chooser of the comparison lists it. */
export const lapChoiceSchema = z.object({
  id: idSchema,
  number: z.int(),
  timeS: z.number(),
  excluded: z.boolean(),
  outing: z.object({ id: idSchema, number: z.int() }),
  day: z.object({ id: idSchema, date: z.string() }),
  layout: z.object({ id: idSchema, name: z.string(), circuitName: z.string() }),
  carName: z.string(),
  driverName: z.string(),
  setupNumber: z.int(),
  isOutingBest: z.boolean(),
})
export type LapChoice = z.infer<typeof lapChoiceSchema>

/** The demonstration in a team: the day to begin with, and whether it was made just now. */
export const demonstrationSchema = z.object({ dayId: idSchema, made: z.boolean() })
export type Demonstration = z.infer<typeof demonstrationSchema>
