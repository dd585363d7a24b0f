import { z } from 'zod'
import { makePlane, pointToPlane, type GlobePoint } from '../plane'
import { basedOn, idSchema, nameSchema, notesSchema, versioned } from './common'

export const DIRECTIONS = ['clockwise', 'anticlockwise'] as const

const timeZoneSchema = z.string().max(60).refine(isTimeZone, 'a time zone such as Europe/London')

function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: name })
    return true
  }
  catch {
    return false
  }
}

export const circuitBody = z.object({
  name: nameSchema,
  timeZone: timeZoneSchema,
  notes: notesSchema,
})
export type CircuitBody = z.infer<typeof circuitBody>
export const circuitChange = circuitBody.extend(basedOn)

export const layoutBody = z.object({
  name: nameSchema,
  /** null: as most laps of a log go round. */
  direction: z.enum(DIRECTIONS).nullable().default(null),
})
export type LayoutBody = z.infer<typeof layoutBody>
export const layoutChange = layoutBody.extend(basedOn)

/** Nothing more is asked of a line whose ends are no places on earth: its length could not be told. */
function degreesUpTo(most: number) {
  const rule = { error: `between \u2212${most}° and ${most}°`, abort: true }
  return z.number().min(-most, rule).max(most, rule)
}

const pointSchema = z.object({ latitudeDeg: degreesUpTo(90), longitudeDeg: degreesUpTo(180) })

/** No track is this wide; a longer line would cut half the circuit. */
const LONGEST_LINE_M = 1000

export const timingLineSchema = z.object({
  kind: z.enum(['start_finish', 'sector']),
  /** 0 for the start/finish line, 1..n for sector lines in driving order. */
  ordinal: z.int().min(0).max(20),
  a: pointSchema,
  b: pointSchema,
}).refine(line => (line.kind === 'start_finish') === (line.ordinal === 0), { path: ['ordinal'], message: 'the start/finish line has ordinal 0, sector lines count from 1' })
  .refine(line => lengthM(line) > 0, { path: ['b'], message: 'the two ends of a line cannot be the same point' })
  .refine(line => lengthM(line) <= LONGEST_LINE_M, { path: ['b'], message: `a line is at most ${LONGEST_LINE_M} m long` })

function lengthM({ a, b }: { a: GlobePoint, b: GlobePoint }): number {
  const { xM, yM } = pointToPlane(makePlane(a.latitudeDeg, a.longitudeDeg), b)
  return Math.hypot(xM, yM)
}

const lineSet = z.array(timingLineSchema).max(21).refine(
  lines => lines.map(line => line.ordinal).sort((a, b) => a - b).every((ordinal, i) => ordinal === i),
  'one start/finish line, and sector lines numbered 1, 2, 3 without a gap',
)

/** All lines of a layout at once, so that a set is never half changed. */
export const linesBody = z.object({
  /** `linesVersion` of the layout as it was read; when somebody else has changed the lines since, nothing is saved. */
  basedOnVersion: z.int().min(0).max(2_147_483_646),
  lines: lineSet,
})

export const savedLineSchema = z.object({
  id: idSchema,
  kind: z.enum(['start_finish', 'sector']),
  ordinal: z.int(),
  a: pointSchema,
  b: pointSchema,
})
export type SavedLine = z.infer<typeof savedLineSchema>

export const layoutSchema = z.object({
  id: idSchema,
  teamId: idSchema,
  circuitId: idSchema,
  circuitName: z.string(),
  name: z.string(),
  direction: z.enum(DIRECTIONS).nullable(),
  /** Distance driven in the fastest lap of the first log that gave one since the lines changed, metres; else null. */
  lengthM: z.number().nullable(),
  /** Goes up with every change of the lines. */
  linesVersion: z.int(),
  lines: z.array(savedLineSchema),
  ...versioned,
})
export type Layout = z.infer<typeof layoutSchema>

/** A layout whose lines were saved, with how many of its logs are cut again. */
export const savedLinesSchema = layoutSchema.extend({ recutting: z.int() })

/** A layout as the chooser of the comparison lists it. */
export const layoutChoiceSchema = z.object({
  id: idSchema,
  name: z.string(),
  circuitId: idSchema,
  circuitName: z.string(),
  timedLapCount: z.int(),
})
export type LayoutChoice = z.infer<typeof layoutChoiceSchema>

export const circuitSchema = z.object({
  id: idSchema,
  teamId: idSchema,
  name: z.string(),
  timeZone: z.string(),
  notes: z.string(),
  layouts: z.array(layoutSchema
    .pick({ id: true, name: true, direction: true, lengthM: true, version: true, changedAt: true })
    .extend({ lineCount: z.int() })),
  ...versioned,
})
export type Circuit = z.infer<typeof circuitSchema>

/** Logs driven on a layout, for choosing the trace on which its lines are drawn. */
export const layoutLogSchema = z.object({
  id: idSchema,
  fileName: z.string(),
  outingId: idSchema,
  outingNumber: z.int(),
  date: z.string(),
  status: z.string(),
})
export type LayoutLog = z.infer<typeof layoutLogSchema>

/** Lines to be tried on a log; without a start/finish line there is nothing to try. */
export const lineTrialBody = z.object({
  logId: idSchema,
  lines: lineSet.refine(lines => lines.length > 0, 'a start/finish line is needed first'),
})

/** What a set of lines would do to a log, worked out without storing anything. */
export const lineTrialSchema = z.object({
  timedLaps: z.int(),
  bestS: z.number().nullable(),
  lines: z.array(z.object({
    ordinal: z.int(),
    crossed: z.int(),
    ignored: z.int(),
    offSquareDeg: z.number().nullable(),
  })),
  warnings: z.array(z.object({ code: z.string(), message: z.string() })),
})
export type LineTrial = z.infer<typeof lineTrialSchema>
