import { z } from 'zod'
import { idSchema } from './common'

export const LOG_STATUSES = ['uploading', 'mapping', 'queued', 'processing', 'no_lines', 'ready', 'refused'] as const
export type LogStatus = (typeof LOG_STATUSES)[number]

/** The steps a person sees while a log is read, in order. */
export const LOG_STEPS = ['read', 'clean', 'cut', 'store'] as const
export type LogStep = (typeof LOG_STEPS)[number]

/** One column of a file and the channel it becomes. `channel: null` leaves the column in the file only. */
export const columnChoiceSchema = z.object({
  index: z.int().min(0).max(9999),
  source: z.string().max(200),
  channel: z.string().regex(/^[a-z][a-z0-9_]{0,62}$/, 'lower-case letters, digits and underscores').nullable(),
  unit: z.string().max(20),
})
export type ColumnChoice = z.infer<typeof columnChoiceSchema>

/** What each column of a file is. Exactly one time, one latitude and one longitude; no channel twice. */
export const columnMapSchema = z.object({
  columns: z.array(columnChoiceSchema).min(1).max(400),
}).superRefine((map, context) => {
  const seen = new Map<string, number>()
  for (const [i, column] of map.columns.entries()) {
    if (column.channel === null) continue
    if (seen.has(column.channel)) {
      context.addIssue({ code: 'custom', path: ['columns', i, 'channel'], message: `two columns cannot both be ${column.channel}; leave one of them out` })
    }
    seen.set(column.channel, i)
  }
  for (const needed of ['time', 'latitude', 'longitude']) {
    if (!seen.has(needed)) context.addIssue({ code: 'custom', path: ['columns'], message: `no column is marked as ${needed}; laps need time, latitude and longitude` })
  }
})
export type ColumnMap = z.infer<typeof columnMapSchema>

/** One column of a file as it was found, with the guess. */
export const previewColumnSchema = columnChoiceSchema.extend({
  firstValues: z.array(z.string()),
  /** sure: the header names channel and unit; likely: one of them is a guess; unknown: kept under its own name. */
  confidence: z.enum(['sure', 'likely', 'unknown']),
  /** A sentence that says what the guess rests on. */
  reason: z.string(),
})
export type PreviewColumn = z.infer<typeof previewColumnSchema>

/** The shape of a file, found from its first rows. `row` numbers are lines of the file counted from 1. */
export const logPreviewSchema = z.object({
  encoding: z.enum(['utf-8', 'utf-16le', 'utf-16be', 'latin1']),
  delimiter: z.string().length(1),
  headerRow: z.int().min(1),
  unitsRow: z.int().min(1).nullable(),
  firstDataRow: z.int().min(1),
  columns: z.array(previewColumnSchema),
})
export type LogPreview = z.infer<typeof logPreviewSchema>

/** Something the reader met, in words a person can act on. `row` is the line of the file, counted from 1. */
export const logProblemSchema = z.object({
  code: z.string(),
  message: z.string(),
  row: z.int().min(1).optional(),
  /** How many rows it concerns, the first of them being `row`. */
  count: z.int().min(1).optional(),
})
export type LogProblem = z.infer<typeof logProblemSchema>

/** A log that has just come: waiting for its columns to be confirmed, or for the worker where its header is known. */
export const arrivedSchema = z.object({ id: idSchema, status: z.enum(['mapping', 'queued']) })

/** The driven path of a log, thinned for drawing; null where there is no position. */
export const traceSchema = z.object({
  timeS: z.array(z.number()),
  latitudeDeg: z.array(z.number().nullable()),
  longitudeDeg: z.array(z.number().nullable()),
  gaps: z.array(z.object({ fromS: z.number(), toS: z.number() })),
})
