import { z } from 'zod'

export const idSchema = z.uuid('not an identifier of Lapwright')

export const ROLES = ['owner', 'driver', 'coach', 'crew'] as const
export type Role = (typeof ROLES)[number]

/** Text a person typed on one line: trimmed, never empty. */
export const nameSchema = z.string().trim().min(1, 'please give a name').max(120, 'at most 120 characters')

/** Free text; empty means nothing was said. */
export const notesSchema = z.string().trim().max(8000, 'at most 8000 characters').default('')

/** A figure that may be missing. `from` and `to` are the plausible range, said in the message. */
export function optionalNumber(from: number, to: number, unit: string) {
  const message = `between ${from} and ${to}${unit ? ` ${unit}` : ''}`.replaceAll('-', '\u2212')
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

export const idParams = z.object({ id: idSchema })
export const teamQuery = z.object({ teamId: idSchema })

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
