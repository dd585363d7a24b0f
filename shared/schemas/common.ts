import { z } from 'zod'
import { rangeWords } from '../range-words'

export const idSchema = z.uuid('not an identifier of Lapwright')

export const ROLES = ['owner', 'driver', 'coach', 'crew'] as const
export type Role = (typeof ROLES)[number]

/** Text a person typed on one line: trimmed, never empty. */
export const nameSchema = z.string().trim().min(1, 'please give a name').max(120, 'at most 120 characters')

/** Free text; empty means nothing was said. */
export const notesSchema = z.string().trim().max(8000, 'at most 8000 characters').default('')

/** A figure that may be missing. `from` and `to` are the plausible range, said in the message. */
export function optionalNumber(from: number, to: number, unit: string) {
  const message = rangeWords(from, to, unit)
  return z.number(message).min(from, message).max(to, message).nullable().default(null)
}

/** A pressure above ambient that may be missing, kPa. The message says bar as well: forms show it in bar. */
export function optionalPressureKpa() {
  return optionalNumber(50, 500, 'kPa, that is 0.5 to 5 bar')
}

/** Calendar date as YYYY-MM-DD. */
export const dateSchema = z.iso.date('a date as YYYY-MM-DD')

/** Instant as RFC 3339 with a zone. */
export const instantSchema = z.iso.datetime({ offset: true, message: 'a date and time with a zone' })

/** Version of a sheet that a form replaces as a whole: goes up with each change. */
export const versionSchema = z.int().min(1).max(2_147_483_647)

/**
 * The version on which a change is based, as it was read; when somebody else has changed the sheet since, nothing is
 * saved.
 */
export const basedOn = { basedOnVersion: versionSchema }

/** What the answers say of a sheet's version. */
export const versioned = {
  version: versionSchema,
  /** When the sheet was written or last changed. */
  changedAt: z.string(),
}

/** Type of the problem when a sheet has been changed by somebody else since it was read. */
export const CHANGED_TYPE = 'urn:lapwright:changed'

/** A list, as every route answers one. */
export function listOf<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item) })
}

/** What a route answers when it has made something. */
export const madeSchema = z.object({ id: idSchema })
/** The same, of something that is numbered within its parent. */
export const numberedSchema = z.object({ id: idSchema, number: z.int() })

export const idParams = z.object({ id: idSchema })
export const teamQuery = z.object({ teamId: idSchema })

/** A document by the OpenAPI Specification 3.1. */
export const openApiSchema = z.record(z.string(), z.unknown())

export const healthSchema = z.object({ ok: z.boolean(), roles: z.array(z.enum(['web', 'worker'])) })

/** RFC 9457 problem details, as every error of /api is answered. */
export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  detail: z.string(),
  /** Path of each bad field, with what is wrong there. */
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  /** A page that helps, for example the log that holds the same file already. */
  see: z.string().optional(),
  requestId: z.string().optional(),
})
export type Problem = z.infer<typeof problemSchema>
