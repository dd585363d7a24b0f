import { z } from 'zod'
import { idSchema, nameSchema } from './common'

/** For how many days a token may live; null: until it is revoked. */
export const TOKEN_DAYS = [30, 90, 365] as const

export const tokenBody = z.object({
  name: nameSchema,
  expiresInDays: z.union(TOKEN_DAYS.map(days => z.literal(days)), '30, 90, 365 or nothing').nullable().default(90),
  /** Asked again, so that neither a stolen token nor an open browser can make another one. */
  password: z.string().min(1, 'please give your password').max(200),
})

/** A token as lists show it: never the token itself. */
export const tokenSchema = z.object({
  id: idSchema,
  name: z.string(),
  /** The last four characters, to tell tokens apart. */
  ending: z.string(),
  createdAt: z.string(),
  lastUsedAt: z.string().nullable(),
  expiresAt: z.string().nullable(),
})
export type Token = z.infer<typeof tokenSchema>

/** The one time at which a token is told. */
export const newTokenSchema = tokenSchema.extend({ token: z.string() })
export type NewToken = z.infer<typeof newTokenSchema>
