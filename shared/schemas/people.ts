import { z } from 'zod'
import { NUMBER_LANGUAGE_TAGS } from '../number-language'
import { UNITS } from '../quantities'
import { idSchema, nameSchema, ROLES } from './common'

const emailSchema = z.string().trim().toLowerCase().max(254).pipe(z.email('an e-mail address such as nell@lapwright.example'))
const passwordSchema = z.string().min(10, 'at least 10 characters').max(200, 'at most 200 characters')

export const registerBody = z.object({
  name: nameSchema,
  email: emailSchema,
  password: passwordSchema,
  teamName: nameSchema,
})

export const signInBody = z.object({
  email: emailSchema,
  password: z.string().min(1, 'please give your password').max(200),
})

export const changePasswordBody = z.object({
  currentPassword: z.string().min(1, 'please give your present password').max(200),
  newPassword: passwordSchema,
})

export const SHEETS = ['paper', 'dark', 'device'] as const

/** How a person reads: units and language of figures, and whether the sheet is paper, dark, or as the device has it. */
export const preferencesSchema = z.object({
  units: z.enum(UNITS, 'metric or imperial'),
  numberLanguage: z.enum(NUMBER_LANGUAGE_TAGS, `one of ${NUMBER_LANGUAGE_TAGS.join(', ')}`),
  sheet: z.enum(SHEETS, 'paper, dark or device'),
})
export type Preferences = z.infer<typeof preferencesSchema>

/** What strangers get, and everybody at first. */
export const FIRST_PREFERENCES: Preferences = { units: 'metric', numberLanguage: 'en-GB', sheet: 'device' }

/** Who is signed in, and in which teams with which role. */
export const meSchema = z.object({
  id: idSchema,
  name: z.string(),
  email: z.string(),
  preferences: preferencesSchema,
  teams: z.array(z.object({ id: idSchema, name: z.string(), role: z.enum(ROLES) })),
})
export type Me = z.infer<typeof meSchema>

export const memberSchema = z.object({
  userId: idSchema,
  name: z.string(),
  role: z.enum(ROLES),
})
export type Member = z.infer<typeof memberSchema>
