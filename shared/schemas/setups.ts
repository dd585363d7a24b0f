import { z } from 'zod'
import { basedOn, idSchema, nameSchema, notesSchema, optionalNumber, optionalPressureKpa, versioned } from './common'

export const CORNERS = ['fl', 'fr', 'rl', 'rr'] as const
export type CornerKey = (typeof CORNERS)[number]

const cornerSchema = z.object({
  coldKpa: optionalPressureKpa(),
  targetHotKpa: optionalPressureKpa(),
  camberDeg: optionalNumber(-12, 12, '°'),
  casterDeg: optionalNumber(-5, 20, '°'),
  toeMm: optionalNumber(-30, 30, 'mm'),
  springNpmm: optionalNumber(1, 1000, 'N/mm'),
  bumpClicks: optionalNumber(0, 100, 'clicks'),
  reboundClicks: optionalNumber(0, 100, 'clicks'),
  rideHeightMm: optionalNumber(0, 600, 'mm'),
})

const shortText = z.string().trim().max(80, 'at most 80 characters').default('')

/** The settings of a car. What came of them (hot pressures, fuel, temperatures) belongs to the outing. */
export const sheetSchema = z.object({
  corners: z.object({ fl: cornerSchema, fr: cornerSchema, rl: cornerSchema, rr: cornerSchema }),
  axles: z.object({
    front: z.object({ barMm: optionalNumber(0, 80, 'mm') }),
    rear: z.object({ barMm: optionalNumber(0, 80, 'mm') }),
  }),
  car: z.object({
    brakeBiasPct: optionalNumber(0, 100, '% front'),
    frontPads: shortText,
    rearPads: shortText,
    splitterMm: optionalNumber(-200, 400, 'mm'),
    wingDeg: optionalNumber(-10, 40, '°'),
    ballastKg: optionalNumber(0, 300, 'kg'),
  }),
  clicksFrom: z.enum(['full stiff', 'full soft']).default('full stiff'),
  notes: notesSchema,
})
export type Sheet = z.infer<typeof sheetSchema>
export type SheetCorner = z.infer<typeof cornerSchema>

/** A setting as lists of changes show it; null where nothing was filled in. */
export const settingSchema = z.union([z.number(), z.string(), z.null()])

/** A sheet with every field there and nothing filled in. */
export function emptySheet(): Sheet {
  const corner = () => cornerSchema.parse({})
  return sheetSchema.parse({
    corners: { fl: corner(), fr: corner(), rl: corner(), rr: corner() },
    axles: { front: {}, rear: {} },
    car: {},
  })
}

export const carBody = z.object({
  name: nameSchema,
  number: z.string().trim().max(10, 'at most 10 characters').default(''),
  year: z.int('a year such as 2006').min(1886, 'a year such as 2006').max(2100, 'a year such as 2006').nullable().default(null),
  kind: z.string().trim().max(120, 'at most 120 characters').default(''),
  notes: notesSchema,
})
export type CarBody = z.infer<typeof carBody>
export const carChange = carBody.extend(basedOn)

export const setupBody = z.object({
  name: nameSchema,
  basedOnId: idSchema.nullable().default(null),
  sheet: sheetSchema,
})

export const setupSummarySchema = z.object({
  id: idSchema,
  number: z.int(),
  name: z.string(),
  createdAt: z.string(),
  createdByName: z.string().nullable(),
  outingCount: z.int(),
})
export type SetupSummary = z.infer<typeof setupSummarySchema>

/** A revision in the list of its car, with what it changed on the revision it is based on. */
export const setupListItemSchema = setupSummarySchema.extend({
  basedOnNumber: z.int().nullable(),
  changes: z.array(z.object({
    label: z.string(),
    unit: z.string(),
    from: z.union([z.number(), z.string(), z.null()]),
    to: z.union([z.number(), z.string(), z.null()]),
  })),
})
export type SetupListItem = z.infer<typeof setupListItemSchema>

export const carSchema = carBody.extend({
  id: idSchema,
  teamId: idSchema,
  notes: z.string(),
  setups: z.array(setupListItemSchema),
  ...versioned,
})
export type Car = z.infer<typeof carSchema>

export const setupSchema = setupSummarySchema.extend({
  teamId: idSchema,
  carId: idSchema,
  carName: z.string(),
  basedOnId: idSchema.nullable(),
  basedOnNumber: z.int().nullable(),
  sheet: sheetSchema,
})
export type Setup = z.infer<typeof setupSchema>
